/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Linear probing from a multiplicative hash (Fowler, Noll & Vo, FNV-1a, 32 bits). */
#include "words.h"

#include <string.h>

static uint32_t hash(const char *text, size_t length) {
  uint32_t value = 2166136261u;
  for (size_t i = 0; i < length; i++) value = (value ^ (unsigned char)text[i]) * 16777619u;
  return value;
}

/* The slot of the word, or the free one where it would be put. */
static int *slot_of(const lac_words *words, const char *text, size_t length) {
  for (size_t i = hash(text, length) & (2 * words->room - 1);; i = (i + 1) & (2 * words->room - 1)) {
    int *slot = &words->slots[i];
    if (!*slot) return slot;
    const lac_word *word = &words->list[*slot - 1];
    if (word->length == length && memcmp(word->text, text, length) == 0) return slot;
  }
}

void lac_words_put(lac_words *words, lac_word word) {
  int *slot = slot_of(words, word.text, word.length);
  if (*slot) return;
  words->list[words->count++] = word;
  *slot = (int)words->count;
}

void lac_words_cut(lac_words *words, size_t count) {
  const size_t kept = count < words->count ? count : words->count;
  words->count = 0;
  if (words->room) memset(words->slots, 0, 2 * words->room * sizeof *words->slots);
  for (size_t i = 0; i < kept; i++) lac_words_put(words, words->list[i]);
}

bool lac_words_reserve(lac_words *words, lac_arena *arena, size_t more) {
  if (words->room >= words->count + more) return true;
  lac_words larger = {.room = words->room ? words->room : 256, .count = words->count};
  while (larger.room < words->count + more) larger.room *= 2;
  larger.list = lac_arena_take(arena, larger.room * sizeof *larger.list);
  larger.slots = lac_arena_take(arena, 2 * larger.room * sizeof *larger.slots);
  if (!larger.list || !larger.slots) return false;
  if (words->count) memcpy(larger.list, words->list, words->count * sizeof *words->list);
  *words = larger;
  lac_words_cut(words, words->count); /* fills the slots */
  return true;
}

int lac_words_find(const lac_words *words, const char *text) {
  if (!words->room) return -1;
  const int slot = *slot_of(words, text, strlen(text));
  return slot ? words->list[slot - 1].id : -1;
}
