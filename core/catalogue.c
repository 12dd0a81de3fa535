/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The catalogue: the glossary and the tables of relations joined, templates expanded, every string resolved to an id once.
   Rows and names written once are used where they stand; what is expanded or copied lives in an arena, so that pointers stay
   valid as long as the catalogue. Ids and row numbers never change: users' names and rows come after the built-in ones. */
#include "lacuna/catalogue.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "arena.h"
#include "range.h"
#include "relation.h"
#include "templates.h"
#include "words.h"

/* In the order in which rows of one kind stand under a name. */
static const lac_relation *const tables[] = {lac_starlight_relations,  lac_planck_relations,    lac_photometry_relations, lac_disc_relations,
                                             lac_dust_relations,       lac_rim_relations,        lac_orbit_relations,     lac_gap_relations,
                                             lac_resolution_relations, lac_brightness_relations, lac_emission_relations, lac_disc_emission_relations};
enum { TABLES = sizeof tables / sizeof tables[0] };

typedef struct {
  const lac_name *name;
  lac_unit unit;
  lac_range range;
  const int *rows;
  int row_count;
} name_entry;

typedef struct {
  const lac_relation *relation;
  const int *from;
  int from_count, gives;
  double assumed;
} row_entry;

struct lac_catalogue {
  lac_arena arena;
  lac_words words, synonyms;
  name_entry *names;
  row_entry *rows;
  int name_count, name_room, row_count, row_room;
};

/* Look-ups. */

int lac_catalogue_names(const lac_catalogue *catalogue) { return catalogue->name_count; }
int lac_catalogue_rows(const lac_catalogue *catalogue) { return catalogue->row_count; }
const lac_name *lac_catalogue_name(const lac_catalogue *catalogue, int id) { return catalogue->names[id].name; }
const lac_relation *lac_catalogue_row(const lac_catalogue *catalogue, int row) { return catalogue->rows[row].relation; }
lac_unit lac_catalogue_unit(const lac_catalogue *catalogue, int id) { return catalogue->names[id].unit; }
lac_range lac_catalogue_range(const lac_catalogue *catalogue, int id) { return catalogue->names[id].range; }
int lac_catalogue_gives(const lac_catalogue *catalogue, int row) { return catalogue->rows[row].gives; }
double lac_catalogue_assumed(const lac_catalogue *catalogue, int row) { return catalogue->rows[row].assumed; }

int lac_catalogue_find(const lac_catalogue *catalogue, const char *name) { return lac_words_find(&catalogue->words, name); }

int lac_catalogue_find_synonym(const lac_catalogue *catalogue, const char *word) {
  const int id = lac_catalogue_find(catalogue, word);
  return id >= 0 ? id : lac_words_find(&catalogue->synonyms, word);
}

const int *lac_catalogue_rows_of(const lac_catalogue *catalogue, int id, int *count) {
  *count = catalogue->names[id].row_count;
  return catalogue->names[id].rows;
}

const int *lac_catalogue_from(const lac_catalogue *catalogue, int row, int *count) {
  *count = catalogue->rows[row].from_count;
  return catalogue->rows[row].from;
}

int lac_catalogue_find_row(const lac_catalogue *catalogue, int id, const char *by) {
  const name_entry *entry = &catalogue->names[id];
  for (int i = 0; i < entry->row_count; i++)
    if (strcmp(catalogue->rows[entry->rows[i]].relation->by, by) == 0) return entry->rows[i];
  return -1;
}

/* Room: a larger copy of a list in the arena; the old one is left behind there. */

static void *larger_list(lac_arena *arena, const void *list, int count, int room, size_t size) {
  void *larger = lac_arena_take(arena, (size_t)room * size);
  if (larger && count > 0) memcpy(larger, list, (size_t)count * size);
  return larger;
}

static bool reserve_name(lac_catalogue *catalogue) {
  if (catalogue->name_count < catalogue->name_room) return true;
  const int room = catalogue->name_room ? 2 * catalogue->name_room : 256;
  name_entry *names = larger_list(&catalogue->arena, catalogue->names, catalogue->name_count, room, sizeof *names);
  if (!names) return false;
  catalogue->names = names;
  catalogue->name_room = room;
  return true;
}

static bool reserve_row(lac_catalogue *catalogue) {
  if (catalogue->row_count < catalogue->row_room) return true;
  const int room = catalogue->row_room ? 2 * catalogue->row_room : 512;
  row_entry *rows = larger_list(&catalogue->arena, catalogue->rows, catalogue->row_count, room, sizeof *rows);
  if (!rows) return false;
  catalogue->rows = rows;
  catalogue->row_room = room;
  return true;
}

/* Names. */

/* A name or synonym in a list apart by spaces: its length, 0 past the last; *text is moved to its start. */
static size_t next_word(const char **text) {
  *text += strspn(*text, " ");
  return strcspn(*text, " ");
}

static bool put_words(lac_catalogue *catalogue, int id) {
  const lac_name *name = catalogue->names[id].name;
  const char *synonym = name->synonyms ? name->synonyms : "";
  const bool room = lac_words_reserve(&catalogue->words, &catalogue->arena, 1) &&
                    lac_words_reserve(&catalogue->synonyms, &catalogue->arena, strlen(synonym) / 2 + 1);
  if (!room) return false;
  lac_words_put(&catalogue->words, (lac_word){name->name, (uint32_t)strlen(name->name), id});
  for (size_t length; (length = next_word(&synonym)) > 0; synonym += length)
    lac_words_put(&catalogue->synonyms, (lac_word){synonym, (uint32_t)length, id});
  return true;
}

/* The tables use few units many times: an equal pointer to the string saves reading it again. */
static bool read_unit(const lac_catalogue *catalogue, const char *text, lac_unit *unit) {
  if (!text) return false;
  for (int id = catalogue->name_count - 1; id >= 0 && id > catalogue->name_count - 16; id--) {
    if (catalogue->names[id].name->unit != text) continue;
    *unit = catalogue->names[id].unit;
    return true;
  }
  const lac_unit_kind kind = lac_unit_read(text, strlen(text), false, unit, NULL);
  return kind == LAC_UNIT_FINE || kind == LAC_UNIT_DEPRECATED || kind == LAC_UNIT_SHORT_FORM;
}

/* A name serves as an axis's name too, which limits its length. */
bool lac_catalogue_fit_name(const char *text) {
  static const char letters[] = "abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ_0123456789";
  if (!text || !*text || (*text >= '0' && *text <= '9')) return false;
  const size_t length = strspn(text, letters);
  return text[length] == '\0' && length <= LAC_MAX_NAME;
}

/* Adds a name whose strings stay. */
static lac_status put_name(lac_catalogue *catalogue, const lac_name *name) {
  name_entry entry = {.name = name};
  if (!lac_catalogue_fit_name(name->name)) return LAC_BAD_SYNTAX;
  if (lac_catalogue_find(catalogue, name->name) >= 0) return LAC_DUPLICATE;
  if (!read_unit(catalogue, name->unit, &entry.unit)) return LAC_UNKNOWN_UNIT;
  if (name->on_sky && !lac_dimension_equal(entry.unit.dimension, (lac_dimension){.numerator[LAC_LENGTH] = 1, .denominator = 1}))
    return LAC_WRONG_DIMENSION;
  if (lac_range_read(name->range, entry.unit.dimension, &entry.range) != LAC_OK) return LAC_BAD_SYNTAX;
  if (!reserve_name(catalogue)) return LAC_NO_MEMORY;
  const int id = catalogue->name_count;
  catalogue->names[id] = entry;
  if (!put_words(catalogue, id)) return LAC_NO_MEMORY;
  catalogue->name_count = id + 1;
  return LAC_OK;
}

/* Rows. */

static bool known_names(const lac_catalogue *catalogue, const lac_relation *relation) {
  for (int i = 0; i < LAC_MAX_ARGUMENTS && relation->from[i]; i++)
    if (lac_catalogue_find(catalogue, relation->from[i]) < 0) return false;
  for (int i = 0; i < LAC_MAX_BOUNDS && relation->holds[i].name; i++)
    if (lac_catalogue_find(catalogue, relation->holds[i].name) < 0) return false;
  return lac_catalogue_find(catalogue, relation->gives) >= 0;
}

/* Where the row stands under its name: after all rows of its kind, before those of later kinds. The old list stays as it was. */
static bool list_row(lac_catalogue *catalogue, int row) {
  name_entry *entry = &catalogue->names[catalogue->rows[row].gives];
  int *list = lac_arena_take(&catalogue->arena, ((size_t)entry->row_count + 1) * sizeof *list);
  if (!list) return false;
  int at = entry->row_count;
  while (at > 0 && catalogue->rows[entry->rows[at - 1]].relation->kind > catalogue->rows[row].relation->kind) at--;
  for (int i = 0; i < at; i++) list[i] = entry->rows[i];
  list[at] = row;
  for (int i = at; i < entry->row_count; i++) list[i + 1] = entry->rows[i];
  entry->rows = list;
  entry->row_count++;
  return true;
}

/* Adds a row whose strings stay. */
static lac_status put_row(lac_catalogue *catalogue, const lac_relation *relation) {
  if (!relation->by) return LAC_BAD_SYNTAX;
  if (relation->from[LAC_MAX_ARGUMENTS]) return LAC_TOO_MANY;
  if (!known_names(catalogue, relation)) return LAC_UNKNOWN_NAME;
  row_entry entry = {.relation = relation, .gives = lac_catalogue_find(catalogue, relation->gives), .assumed = (double)NAN};
  if (lac_catalogue_find_row(catalogue, entry.gives, relation->by) >= 0) return LAC_DUPLICATE;
  if (relation->assumes) {
    const lac_dimension dimension = catalogue->names[entry.gives].unit.dimension;
    const lac_status status = lac_table_value(relation->assumes, strlen(relation->assumes), dimension, &entry.assumed);
    if (status != LAC_OK) return status;
  }
  while (entry.from_count < LAC_MAX_ARGUMENTS && relation->from[entry.from_count]) entry.from_count++;
  int *from = lac_arena_take(&catalogue->arena, (size_t)entry.from_count * sizeof *from);
  if (!from || !reserve_row(catalogue)) return LAC_NO_MEMORY;
  for (int i = 0; i < entry.from_count; i++) from[i] = lac_catalogue_find(catalogue, relation->from[i]);
  entry.from = from;
  catalogue->rows[catalogue->row_count] = entry;
  if (!list_row(catalogue, catalogue->row_count)) return LAC_NO_MEMORY;
  catalogue->row_count++;
  return LAC_OK;
}

/* Whether a name follows, by rows other than inverse ones, from any of those in the list: then a row that gives them from it
   would close a circle. ids holds them at first and has room for all names; seen is all false. */
static bool rests_on(const lac_catalogue *catalogue, int target, int *ids, int count, bool *seen) {
  while (count > 0) {
    const int id = ids[--count];
    if (id == target) return true;
    if (seen[id]) continue;
    seen[id] = true;
    for (int i = 0; i < catalogue->names[id].row_count; i++) {
      const row_entry *row = &catalogue->rows[catalogue->names[id].rows[i]];
      if (row->relation->inverse_of) continue;
      for (int k = 0; k < row->from_count; k++)
        if (!seen[row->from[k]]) ids[count++] = row->from[k];
    }
  }
  return false;
}

static lac_status check_circle(const lac_catalogue *catalogue, const lac_relation *relation) {
  if (relation->inverse_of) return LAC_OK;
  /* A name waits in the list once for each input place it fills, before it is seen. */
  size_t places = LAC_MAX_ARGUMENTS;
  for (int row = 0; row < catalogue->row_count; row++) places += (size_t)catalogue->rows[row].from_count;
  int *ids = malloc(places * sizeof *ids);
  bool *seen = calloc((size_t)catalogue->name_count, sizeof *seen);
  lac_status status = LAC_NO_MEMORY;
  if (ids && seen) {
    int count = 0;
    for (int i = 0; i < LAC_MAX_ARGUMENTS && relation->from[i]; i++) ids[count++] = lac_catalogue_find(catalogue, relation->from[i]);
    status = rests_on(catalogue, lac_catalogue_find(catalogue, relation->gives), ids, count, seen) ? LAC_CIRCLE : LAC_OK;
  }
  free(ids);
  free(seen);
  return status;
}

/* A length's angle on the sky: its name, after the length's; and, once all names are there, its rows. */
static lac_status put_angle_name(lac_catalogue *catalogue, const lac_name *length) {
  const lac_name *angle = lac_angle_name(&catalogue->arena, length);
  return angle ? put_name(catalogue, angle) : LAC_NO_MEMORY;
}

static lac_status put_angle_rows(lac_catalogue *catalogue, const lac_name *length) {
  lac_status status = LAC_OK;
  for (const lac_relation *prototype = lac_angle_relations; prototype->gives && status == LAC_OK; prototype++) {
    const lac_relation *relation = lac_angle_relation(&catalogue->arena, prototype, length);
    status = relation ? put_row(catalogue, relation) : LAC_NO_MEMORY;
  }
  return status;
}

/* The built-in tables. */

/* One variant of a name of the glossary, and its angle. */
static lac_status put_variant_of_name(lac_catalogue *catalogue, const lac_name *row, int variant) {
  const lac_name *name = row;
  if (row->presence != LAC_ONCE) {
    lac_name *expanded = lac_expand_name(&catalogue->arena, row, lac_variant_marks(row->presence, variant));
    if (!expanded) return LAC_NO_MEMORY;
    if (!lac_variant_has_synonyms(row->presence, variant)) expanded->synonyms = NULL;
    name = expanded;
  }
  const lac_status status = put_name(catalogue, name);
  return status == LAC_OK && name->on_sky ? put_angle_name(catalogue, name) : status;
}

static lac_status put_variant_of_row(lac_catalogue *catalogue, const lac_relation *row, int variant) {
  if (row->presence == LAC_ONCE) return put_row(catalogue, row);
  const lac_relation *expanded = lac_expand_relation(&catalogue->arena, row, lac_variant_marks(row->presence, variant));
  return expanded ? put_row(catalogue, expanded) : LAC_NO_MEMORY;
}

static lac_status put_glossary(lac_catalogue *catalogue, char *error, size_t error_size) {
  for (const lac_name *row = lac_glossary; row->name; row++) {
    for (int variant = 0; variant < lac_variants(row->presence); variant++) {
      const lac_status status = put_variant_of_name(catalogue, row, variant);
      if (status == LAC_OK) continue;
      snprintf(error, error_size, "%s, variant %d: %s", row->name, variant, lac_status_words(status));
      return status;
    }
  }
  return LAC_OK;
}

static lac_status put_table(lac_catalogue *catalogue, const lac_relation *row, char *error, size_t error_size) {
  for (; row->gives; row++) {
    for (int variant = 0; variant < lac_variants(row->presence); variant++) {
      const lac_status status = put_variant_of_row(catalogue, row, variant);
      if (status == LAC_OK) continue;
      snprintf(error, error_size, "%s/%s, variant %d: %s", row->gives, row->by ? row->by : "", variant, lac_status_words(status));
      return status;
    }
  }
  return LAC_OK;
}

static lac_status put_all_angle_rows(lac_catalogue *catalogue, char *error, size_t error_size) {
  for (int id = 0; id < catalogue->name_count; id++) {
    const lac_name *name = catalogue->names[id].name;
    const lac_status status = name->on_sky ? put_angle_rows(catalogue, name) : LAC_OK;
    if (status == LAC_OK) continue;
    snprintf(error, error_size, "%s_angle: %s", name->name, lac_status_words(status));
    return status;
  }
  return LAC_OK;
}

lac_status lac_catalogue_new(lac_catalogue **result, char *error, size_t error_size) {
  *result = NULL;
  if (error_size > 0) *error = '\0';
  lac_catalogue *catalogue = calloc(1, sizeof *catalogue);
  if (!catalogue) return LAC_NO_MEMORY;
  lac_status status = put_glossary(catalogue, error, error_size);
  for (size_t i = 0; i < TABLES && status == LAC_OK; i++) status = put_table(catalogue, tables[i], error, error_size);
  if (status == LAC_OK) status = put_all_angle_rows(catalogue, error, error_size);
  if (status == LAC_OK) *result = catalogue;
  else lac_catalogue_free(catalogue);
  return status;
}

void lac_catalogue_free(lac_catalogue *catalogue) {
  if (!catalogue) return;
  lac_arena_free(&catalogue->arena);
  free(catalogue);
}

/* Users' names and rows. */

lac_status lac_catalogue_add_name(lac_catalogue *catalogue, const lac_name *name, int *id) {
  const int names = catalogue->name_count, rows = catalogue->row_count;
  const size_t words = catalogue->words.count, synonyms = catalogue->synonyms.count;
  catalogue->arena.failed = false;
  const lac_name *copy = lac_expand_name(&catalogue->arena, name, NULL);
  if (!copy) return LAC_NO_MEMORY;
  lac_status status = put_name(catalogue, copy);
  if (status == LAC_OK && copy->on_sky) status = put_angle_name(catalogue, copy);
  if (status == LAC_OK && copy->on_sky) status = put_angle_rows(catalogue, copy);
  if (status != LAC_OK) { /* the rows are listed under the new names alone */
    catalogue->name_count = names;
    catalogue->row_count = rows;
    if (catalogue->words.count > words) lac_words_cut(&catalogue->words, words);
    if (catalogue->synonyms.count > synonyms) lac_words_cut(&catalogue->synonyms, synonyms);
  } else if (id) {
    *id = names;
  }
  return status;
}

lac_status lac_catalogue_add_relation(lac_catalogue *catalogue, const lac_relation *relation, int *row) {
  if (!relation->gives || !known_names(catalogue, relation)) return LAC_UNKNOWN_NAME;
  lac_status status = check_circle(catalogue, relation);
  if (status != LAC_OK) return status;
  catalogue->arena.failed = false;
  lac_relation *copy = lac_expand_relation(&catalogue->arena, relation, NULL);
  if (!copy) return LAC_NO_MEMORY;
  copy->kind = LAC_USERS;
  status = put_row(catalogue, copy);
  if (status == LAC_OK && row) *row = catalogue->row_count - 1;
  return status;
}

/* Sources. */

const lac_source *lac_source_find(const char *id) {
  for (const lac_source *source = lac_sources; source->id; source++)
    if (strcmp(source->id, id) == 0) return source;
  return NULL;
}

const lac_source *lac_source_at(size_t index) {
  for (const lac_source *source = lac_sources; source->id; source++)
    if (index-- == 0) return source;
  return NULL;
}
