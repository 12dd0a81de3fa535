/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The places and structures of the templates, and the replacing of marks. */
#include "templates.h"

#include <string.h>

enum { PLACES = 3, STRUCTURES = 4 };

/* <sub> continues a TeX subscript, <_sub> is a whole one. */
static const lac_mark place_marks[PLACES][6] = {
    {{"<at>", ""}, {"<radius>", "radius"}, {"<where>", "at radius"}, {"<sub>", ""}, {"<_sub>", ""}, {NULL, NULL}},
    {{"<at>", "planet_"},
     {"<radius>", "planet_semi_major_axis"},
     {"<where>", "at the planet"},
     {"<sub>", ",p"},
     {"<_sub>", "_p"},
     {NULL, NULL}},
    {{"<at>", "ring_"}, {"<radius>", "ring_radius"}, {"<where>", "at the ring"}, {"<sub>", ",ring"}, {"<_sub>", "_{ring}"}, {NULL, NULL}},
};

static const lac_mark structure_marks[STRUCTURES][3] = {
    {{"<structure>", "rim"}, {"<size>", "diameter"}, {NULL, NULL}},
    {{"<structure>", "cavity"}, {"<size>", "diameter"}, {NULL, NULL}},
    {{"<structure>", "gap"}, {"<size>", "width"}, {NULL, NULL}},
    {{"<structure>", "ring"}, {"<size>", "width"}, {NULL, NULL}},
};

static const lac_mark no_marks[] = {{NULL, NULL}};

int lac_variants(lac_presence presence) {
  switch (presence) {
  case LAC_AT_EACH_PLACE: return PLACES;
  case LAC_FOR_EACH_STRUCTURE: return STRUCTURES;
  case LAC_ONCE: break;
  }
  return 1;
}

const lac_mark *lac_variant_marks(lac_presence presence, int variant) {
  switch (presence) {
  case LAC_AT_EACH_PLACE: return place_marks[variant];
  case LAC_FOR_EACH_STRUCTURE: return structure_marks[variant];
  case LAC_ONCE: break;
  }
  return no_marks;
}

bool lac_variant_has_synonyms(lac_presence presence, int variant) {
  return presence == LAC_ONCE || (presence == LAC_AT_EACH_PLACE && variant == 0);
}

/* The mark at the start of a text; NULL if there is none. */
static const lac_mark *mark_at(const char *text, const lac_mark *marks) {
  for (; marks->mark; marks++)
    if (strncmp(text, marks->mark, strlen(marks->mark)) == 0) return marks;
  return NULL;
}

/* Replaces the marks; writes where to is not NULL. Returned: the length of the result. */
static size_t replace(const char *text, const lac_mark *marks, char *to) {
  size_t length = 0;
  while (*text) {
    const lac_mark *mark = *text == '<' ? mark_at(text, marks) : NULL;
    const char *piece = mark ? mark->text : text;
    const size_t size = mark ? strlen(piece) : 1 + strcspn(text + 1, "<");
    if (to) memcpy(to + length, piece, size);
    length += size;
    text += mark ? strlen(mark->mark) : size;
  }
  return length;
}

static const char *expand(lac_arena *arena, const char *text, const lac_mark *marks) {
  if (!text || (marks && !strchr(text, '<'))) return text;
  if (!marks) marks = no_marks;
  const size_t length = replace(text, marks, NULL);
  char *copy = lac_arena_take_text(arena, length + 1);
  if (!copy) return NULL;
  replace(text, marks, copy);
  copy[length] = '\0';
  return copy;
}

lac_name *lac_expand_name(lac_arena *arena, const lac_name *name, const lac_mark *marks) {
  lac_name *copy = lac_arena_take(arena, sizeof *copy);
  if (!copy) return NULL;
  *copy = *name;
  copy->presence = LAC_ONCE;
  const char **const strings[] = {&copy->name,   &copy->synonyms, &copy->unit,    &copy->range,
                                  &copy->symbol, &copy->meaning,  &copy->subject, &copy->hint};
  for (size_t i = 0; i < sizeof strings / sizeof strings[0]; i++) *strings[i] = expand(arena, *strings[i], marks);
  return arena->failed ? NULL : copy;
}

lac_relation *lac_expand_relation(lac_arena *arena, const lac_relation *relation, const lac_mark *marks) {
  lac_relation *copy = lac_arena_take(arena, sizeof *copy);
  if (!copy) return NULL;
  *copy = *relation;
  copy->presence = LAC_ONCE;
  const char **const strings[] = {&copy->gives,           &copy->by,       &copy->assumes,  &copy->function_name, &copy->source,
                                  &copy->place_in_source, &copy->equation, &copy->supposes, &copy->unchecked,     &copy->inverse_of};
  for (size_t i = 0; i < sizeof strings / sizeof strings[0]; i++) *strings[i] = expand(arena, *strings[i], marks);
  for (int i = 0; i < LAC_MAX_ARGUMENTS && copy->from[i]; i++) copy->from[i] = expand(arena, copy->from[i], marks);
  for (int i = 0; i < LAC_MAX_BOUNDS && copy->holds[i].name; i++) copy->holds[i].name = expand(arena, copy->holds[i].name, marks);
  for (int i = 0; i < LAC_MAX_CONDITIONS; i++) copy->conditions[i] = expand(arena, copy->conditions[i], marks);
  return arena->failed ? NULL : copy;
}

lac_name *lac_angle_name(lac_arena *arena, const lac_name *length) {
  static const lac_name prototype = {.name = "<length>_angle",
                                     .unit = "mas",
                                     .range = "> 0",
                                     .symbol = "\\theta\\left(<symbol>\\right)",
                                     .meaning = "<meaning>, as an angle on the sky",
                                     .subject = "<subject>"};
  const lac_mark marks[] = {{"<length>", length->name},
                            {"<symbol>", length->symbol},
                            {"<meaning>", length->meaning},
                            {"<subject>", length->subject},
                            {NULL, NULL}};
  return lac_expand_name(arena, &prototype, marks);
}

lac_relation *lac_angle_relation(lac_arena *arena, const lac_relation *prototype, const lac_name *length) {
  const lac_mark marks[] = {{"<length>", length->name}, {NULL, NULL}};
  return lac_expand_relation(arena, prototype, marks);
}
