/* SPDX-License-Identifier: GPL-3.0-or-later */
/* What a mistyped or half remembered name may have meant: names and synonyms by the edits that lead to them (Damerau 1964,
   Communications of the ACM 7, 171; restricted to neighbours swapped once) and by the words they share. */
#include <ctype.h>
#include <limits.h>
#include <stdbool.h>
#include <string.h>

#include "lacuna/catalogue.h"

#include "nearest.h"

enum { LONGEST = 64, MOST_WORDS = 16, SHORTEST_WORD = 3 };

/* Below this a likeness is chance. All the same words in another order are a little less than the same letters. */
static const double least_likeness = 0.6, worth_of_words = 0.9;

typedef struct {
  const char *text;
  size_t length;
} slice;

static bool same_letter(char a, char b) { return tolower((unsigned char)a) == tolower((unsigned char)b); }

static int smaller(int a, int b) { return a < b ? a : b; }

/* Insertions, deletions, substitutions and swaps of neighbours that make b of a; both at most LONGEST. */
static int edits(slice a, slice b) {
  int rows[3][LONGEST + 1];
  int *before = rows[0], *last = rows[1], *now = rows[2];
  for (size_t j = 0; j <= b.length; j++) last[j] = (int)j;
  for (size_t i = 1; i <= a.length; i++) {
    now[0] = (int)i;
    for (size_t j = 1; j <= b.length; j++) {
      const int substituted = last[j - 1] + !same_letter(a.text[i - 1], b.text[j - 1]);
      now[j] = smaller(smaller(last[j], now[j - 1]) + 1, substituted);
      const bool swapped = i > 1 && j > 1 && same_letter(a.text[i - 1], b.text[j - 2]) && same_letter(a.text[i - 2], b.text[j - 1]);
      if (swapped) now[j] = smaller(now[j], before[j - 2] + 1);
    }
    int *oldest = before;
    before = last, last = now, now = oldest;
  }
  return last[b.length];
}

int lac_edits(const char *a, const char *b) {
  const slice from = {a, strlen(a)}, to = {b, strlen(b)};
  return from.length > LONGEST || to.length > LONGEST ? INT_MAX : edits(from, to);
}

/* 1 for equal, 0 for nothing in common. */
static double likeness_of_letters(slice a, slice b) {
  const size_t longer = a.length > b.length ? a.length : b.length;
  return longer ? 1 - edits(a, b) / (double)longer : 0;
}

static int split(slice whole, slice *words) {
  int count = 0;
  size_t start = 0;
  for (size_t i = 0; i <= whole.length; i++) {
    if (i < whole.length && whole.text[i] != '_' && whole.text[i] != ' ') continue;
    if (i > start && count < MOST_WORDS) words[count++] = (slice){whole.text + start, i - start};
    start = i + 1;
  }
  return count;
}

static bool same_word(slice a, slice b) {
  if (a.length != b.length) return false;
  for (size_t i = 0; i < a.length; i++)
    if (!same_letter(a.text[i], b.text[i])) return false;
  return true;
}

/* Twice the words in common over the words of both (Dice 1945, Ecology 26, 297). Words of a letter or two say nothing alone. */
static double likeness_of_words(slice a, slice b) {
  slice of_a[MOST_WORDS], of_b[MOST_WORDS];
  const int count_a = split(a, of_a), count_b = split(b, of_b);
  int common = 0;
  bool taken[MOST_WORDS] = {false};
  for (int i = 0; i < count_a; i++) {
    for (int k = 0; k < count_b; k++) {
      if (taken[k] || of_a[i].length < SHORTEST_WORD || !same_word(of_a[i], of_b[k])) continue;
      taken[k] = true;
      common++;
      break;
    }
  }
  return common ? 2.0 * common / (count_a + count_b) : 0;
}

static double likeness(slice a, slice b) {
  if (a.length > LONGEST || b.length > LONGEST) return 0;
  const double letters = likeness_of_letters(a, b), words = worth_of_words * likeness_of_words(a, b);
  return letters > words ? letters : words;
}

/* The greatest likeness to the name or one of its synonyms. */
static double likeness_to_name(slice word, const lac_name *name) {
  double greatest = likeness(word, (slice){name->name, strlen(name->name)});
  for (const char *text = name->synonyms ? name->synonyms : ""; *text;) {
    const size_t length = strcspn(text, " ");
    const double found = length ? likeness(word, (slice){text, length}) : 0;
    if (found > greatest) greatest = found;
    text += length + (text[length] == ' ');
  }
  return greatest;
}

int lac_catalogue_nearest(const lac_catalogue *catalogue, const char *word, int *ids, int max) {
  enum { MOST = 32 };
  double found[MOST];
  if (max > MOST) max = MOST;
  int count = 0;
  const slice wanted = {word, strlen(word)};
  for (int id = 0; id < lac_catalogue_names(catalogue) && max > 0; id++) {
    const double like = likeness_to_name(wanted, lac_catalogue_name(catalogue, id));
    if (like < least_likeness || (count == max && like <= found[max - 1])) continue;
    int at = count < max ? count++ : max - 1;
    for (; at > 0 && found[at - 1] < like; at--) found[at] = found[at - 1], ids[at] = ids[at - 1];
    found[at] = like;
    ids[at] = id;
  }
  return count;
}
