/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The glossary (what the field's quantities are called and mean) and the relations (how one follows
   from others): the two tables from which help, checks, chaining and reports come. */
#ifndef LACUNA_CATALOGUE_H
#define LACUNA_CATALOGUE_H

#include <stdbool.h>
#include <stddef.h>

#include "lacuna/status.h"
#include "lacuna/units.h"

#ifdef __cplusplus
extern "C" {
#endif

enum { LAC_MAX_ARGUMENTS = 12, LAC_MAX_BOUNDS = 4, LAC_MAX_CONDITIONS = 4, LAC_MAX_NAME = 63 /* bytes of a name */ };

typedef enum {
  LAC_QUANTITY, /* a number with a dimension */
  LAC_VERDICT,  /* 0 or 1: no or yes */
  LAC_OBJECT    /* an immutable object without axes: dust, a band. Its name is its type */
} lac_name_kind;

/* Where a template's names and rows are present. The marks it may carry in its strings are
   replaced there: <at> <radius> <where> <sub> for places, <structure> <size> for structures. */
typedef enum { LAC_ONCE, LAC_AT_EACH_PLACE, LAC_FOR_EACH_STRUCTURE } lac_presence;

/* One row of the glossary. */
typedef struct {
  const char *name;     /* the trade's term, in snake case */
  const char *synonyms; /* what people also call it, apart by spaces; may be NULL */
  const char *unit;     /* display unit, VOUnits; the dimension follows from it */
  const char *range;    /* "> 0", ">= 0", "any", "0 .. 1" (closed), "0 .. < 1", "> 0 .. 1"; in SI units (degrees are written "90 deg") */
  const char *symbol;   /* TeX */
  const char *meaning;  /* one line: what exactly, in which convention */
  const char *subject;  /* heading in help: "star", "radiation", "disc", "rim", "orbit", "gap", "instrument", "visibility" */
  bool on_sky;          /* <name>_angle exists */
  lac_name_kind kind;
  lac_presence presence;
  const char *hint;     /* what help suggests when it must be given; may be NULL */
} lac_name;

typedef enum { LAC_DEFINITION, LAC_RECIPE, LAC_USERS, LAC_ASSUMED } lac_relation_kind;

/* A block form: out[i] = f(in[0][i], in[1][i], ...) for n elements; out overlaps no argument. */
typedef void lac_block_function(size_t n, double *out, const double *const *in);

/* A function of a user's (from a script): as a block form, with a context; non-zero means it failed. */
typedef int lac_user_function(void *context, size_t n, double *out, const double *const *in);

/* Where a recipe is known to hold, one bound for an input; SI units. */
typedef struct {
  const char *name;
  double low, high;
} lac_bound;

/* The same for a row whose first input is an object: in holds the other inputs. Called from several threads at once. */
typedef void lac_object_function(const void *object, size_t n, double *out, const double *const *in);

/* One row of the relations. */
typedef struct {
  const char *gives;
  const char *by;                            /* short name of the recipe; (gives, by) is the row's key */
  const char *from[LAC_MAX_ARGUMENTS + 1];   /* glossary names, in the order of the C function's arguments */
  lac_relation_kind kind;
  lac_presence presence;
  const char *assumes;                       /* for LAC_ASSUMED: the value with its unit; no function then */
  void (*function)(void);                    /* the C function of as many doubles; called through lac_relation_value */
  const char *function_name;
  lac_block_function *block;                 /* the same over blocks */
  lac_block_function *shape;                 /* where the result is from[0] times a function of the rest: that function */
  lac_object_function *of_object;            /* a row whose from[0] is an object has this instead of function and block */
  lac_user_function *call;                   /* a user's row has this instead */
  void *context;
  const char *source;                        /* id in the table of sources */
  const char *place_in_source;               /* "Eq. 5", "Sect. 2"; may be NULL */
  bool from_memory;                          /* the formula was not checked against the paper */
  const char *equation;                      /* small TeX; glossary names stand in square brackets */
  const char *supposes;                      /* what the recipe takes for granted; may be NULL */
  lac_bound holds[LAC_MAX_BOUNDS];           /* range of validity; name NULL past the last */
  const char *conditions[LAC_MAX_CONDITIONS];/* of a verdict, all must be true: "[a] >= [b]", "2 [a] <= [b]" */
  const char *unchecked;                     /* of a verdict: the conditions left out, and for want of what; may be NULL */
  const char *inverse_of;                    /* key of the row it inverts, "gives/by"; or NULL */
  bool aside;                                /* another way to what is mostly given itself: not suggested where that is missing */
} lac_relation;

/* A published source, once. */
typedef struct {
  const char *id, *authors, *year, *title, *journal, *volume, *page;
} lac_source;

typedef struct lac_catalogue lac_catalogue;

/* A name's range: low and high in SI, each included or not. */
typedef struct {
  double low, high;
  bool low_included, high_included;
} lac_range;

/* A new catalogue with the built-in tables, templates expanded, rows in order: definitions, recipes,
   the user's, assumed. Freed by lac_catalogue_free. LAC_NO_MEMORY, or a defect in a table (with its name in error). */
lac_status lac_catalogue_new(lac_catalogue **catalogue, char *error, size_t error_size);
void lac_catalogue_free(lac_catalogue *catalogue);

/* Adds a user's name (with its angle, if it is on the sky), or row (LAC_USERS whatever kind it says: after the built-in recipes, before
   what is assumed). Strings are copied; call and context are kept. Presence is not looked at. id and row may be NULL.
   LAC_DUPLICATE: name or key exists. LAC_UNKNOWN_NAME: a name in the row. LAC_UNKNOWN_UNIT. LAC_BAD_SYNTAX: the range, or a
   name (its angle's included) that is not fit. LAC_WRONG_DIMENSION: on the sky, but no length. LAC_CIRCLE: with the new row, rows other than inverse ones would form a circle. Nothing is added then. */
lac_status lac_catalogue_add_name(lac_catalogue *catalogue, const lac_name *name, int *id);
lac_status lac_catalogue_add_relation(lac_catalogue *catalogue, const lac_relation *relation, int *row);

/* Names by id, 0 to count - 1, in glossary order; rows by number. */
int lac_catalogue_names(const lac_catalogue *catalogue);
int lac_catalogue_rows(const lac_catalogue *catalogue);
const lac_name *lac_catalogue_name(const lac_catalogue *catalogue, int id);
const lac_relation *lac_catalogue_row(const lac_catalogue *catalogue, int row);
lac_unit lac_catalogue_unit(const lac_catalogue *catalogue, int id);   /* of the display unit */
lac_range lac_catalogue_range(const lac_catalogue *catalogue, int id); /* SI */
bool lac_range_holds(lac_range range, double value);                   /* false for NaN */

/* Whether a text could be a name: ASCII letters, digits and _, no digit first, at most LAC_MAX_NAME bytes. */
bool lac_catalogue_fit_name(const char *text);

/* The id of a name, -1 if there is none. Synonyms are not names; by_synonym finds by name or synonym. */
int lac_catalogue_find(const lac_catalogue *catalogue, const char *name);
int lac_catalogue_find_synonym(const lac_catalogue *catalogue, const char *word);

/* The rows that give a name, in order; the ids a row gives and takes; the value an assumed row assumes, SI. */
const int *lac_catalogue_rows_of(const lac_catalogue *catalogue, int id, int *count);
int lac_catalogue_gives(const lac_catalogue *catalogue, int row);
const int *lac_catalogue_from(const lac_catalogue *catalogue, int row, int *count);
int lac_catalogue_find_row(const lac_catalogue *catalogue, int id, const char *by); /* -1 if there is none */
double lac_catalogue_assumed(const lac_catalogue *catalogue, int row);

/* The names and synonyms nearest to a word that is none, best first. Returned: how many, at most max. */
int lac_catalogue_nearest(const lac_catalogue *catalogue, const char *word, int *ids, int max);

/* The value of a row at single arguments, SI; NaN outside its range. Not for rows of users and of objects (NaN). */
double lac_relation_value(const lac_relation *relation, const double *arguments);

/* A source by its id; NULL if there is none. And by index, NULL past the last. */
const lac_source *lac_source_find(const char *id);
const lac_source *lac_source_at(size_t index);

#ifdef __cplusplus
}
#endif

#endif
