/* SPDX-License-Identifier: GPL-3.0-or-later */
/* What a call of the library can answer: done, done but doubtful, refused.
   One list gives the codes and the words, so that neither can be forgotten. */
#ifndef LACUNA_STATUS_H
#define LACUNA_STATUS_H

#ifdef __cplusplus
extern "C" {
#endif

#define LAC_STATUS_LIST(X)                                                                        \
  X(LAC_OK, "done")                                                                               \
  X(LAC_DOUBTFUL, "done, outside the range the recipe holds for")                                 \
  X(LAC_OUT_OF_RANGE, "an argument is outside its range")                                         \
  X(LAC_NO_MEMORY, "out of memory")                                                               \
  X(LAC_OVER_CAP, "would pass the memory cap")                                                    \
  X(LAC_INTERRUPTED, "interrupted")                                                               \
  X(LAC_CALLBACK_FAILED, "a user's function failed")                                              \
  X(LAC_BAD_SYNTAX, "cannot be read")                                                             \
  X(LAC_UNKNOWN_NAME, "unknown name")                                                             \
  X(LAC_UNKNOWN_UNIT, "unknown unit")                                                             \
  X(LAC_WRONG_DIMENSION, "wrong dimension")                                                       \
  X(LAC_AXES_DIFFER, "axes of one name differ")                                                   \
  X(LAC_TOO_MANY, "too many")                                                                     \
  X(LAC_NOT_HAD, "cannot be derived from what is given")                                          \
  X(LAC_DUPLICATE, "given twice")                                                                 \
  X(LAC_CIRCLE, "would form a circle")                                                            \
  X(LAC_NO_SOLUTION, "no solution")

typedef enum {
#define LAC_STATUS_CODE(code, words) code,
  LAC_STATUS_LIST(LAC_STATUS_CODE)
#undef LAC_STATUS_CODE
} lac_status;

/* The words for a status. Given: any lac_status. Returned: a static string, never NULL. */
const char *lac_status_words(lac_status status);

#ifdef __cplusplus
}
#endif

#endif
