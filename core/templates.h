/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Names and rows that are written once and present at several places: their marks replaced by each place's words. */
#ifndef LACUNA_CORE_TEMPLATES_H
#define LACUNA_CORE_TEMPLATES_H

#include "arena.h"
#include "lacuna/catalogue.h"

/* A mark such as "<at>" and what stands for it; a list of them ends with mark NULL. */
typedef struct {
  const char *mark, *text;
} lac_mark;

/* How many variants a template has (1 for LAC_ONCE), and the marks of one (an empty list for LAC_ONCE). */
int lac_variants(lac_presence presence);
const lac_mark *lac_variant_marks(lac_presence presence, int variant);

/* Whether a template's synonyms belong to this variant: they mean the plain place. */
bool lac_variant_has_synonyms(lac_presence presence, int variant);

/* Copies with the marks replaced in all strings, held by the arena; the result's presence is LAC_ONCE. A string without marks
   is shared with the original where marks are given, and copied where marks is NULL. NULL where memory was refused. */
lac_name *lac_expand_name(lac_arena *arena, const lac_name *name, const lac_mark *marks);
lac_relation *lac_expand_relation(lac_arena *arena, const lac_relation *relation, const lac_mark *marks);

/* The name of a length's angle on the sky, <name>_angle; and a prototype row of lac_angle_relations made one of the length's. */
lac_name *lac_angle_name(lac_arena *arena, const lac_name *length);
lac_relation *lac_angle_relation(lac_arena *arena, const lac_relation *prototype, const lac_name *length);

#endif
