/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The words for each status. */
#include "lacuna/status.h"

const char *lac_status_words(lac_status status) {
  switch (status) {
#define LAC_STATUS_CASE(code, words) \
  case code: return words;
    LAC_STATUS_LIST(LAC_STATUS_CASE)
#undef LAC_STATUS_CASE
  }
  return "an unknown status";
}
