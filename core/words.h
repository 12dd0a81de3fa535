/* SPDX-License-Identifier: GPL-3.0-or-later */
/* A hash table from words to ids, in an arena. */
#ifndef LACUNA_CORE_WORDS_H
#define LACUNA_CORE_WORDS_H

#include <stdint.h>

#include "arena.h"

/* The text stays with its owner and need not end in zero. */
typedef struct {
  const char *text;
  uint32_t length;
  int id;
} lac_word;

/* Starts as all zero. Words in the order in which they came, and open addressing to their places; the slots are a power of two, at
   least twice the words. */
typedef struct {
  lac_word *list;
  int *slots; /* index in the list plus one; 0 is free */
  size_t room, count;
} lac_words;

/* Makes room for more words; false where memory is refused. A put after it can't fail. */
bool lac_words_reserve(lac_words *words, lac_arena *arena, size_t more);
/* Puts a word; the first of equal ones stays. */
void lac_words_put(lac_words *words, lac_word word);
/* The id of a word; -1 if there is none. */
int lac_words_find(const lac_words *words, const char *text);
/* Forgets the words past the first count. */
void lac_words_cut(lac_words *words, size_t count);

#endif
