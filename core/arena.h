/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Memory that is taken piece by piece and given back all at once: for the many small strings and lists of a catalogue. */
#ifndef LACUNA_CORE_ARENA_H
#define LACUNA_CORE_ARENA_H

#include <stdbool.h>
#include <stddef.h>

typedef struct lac_arena_chunk lac_arena_chunk;

/* Starts as all zero. failed stays true once memory was refused, so that a whole sequence of requests is checked at its end. */
typedef struct {
  lac_arena_chunk *chunk;
  bool failed;
} lac_arena;

/* Memory for any type, valid until lac_arena_free; NULL (and failed set) where there is none. */
void *lac_arena_take(lac_arena *arena, size_t size);
/* The same for characters, which need no alignment. */
char *lac_arena_take_text(lac_arena *arena, size_t size);
void lac_arena_free(lac_arena *arena);

#endif
