/* SPDX-License-Identifier: GPL-3.0-or-later */
/* How far one word is from another, for names and for a program's options. */
#ifndef LACUNA_CORE_NEAREST_H
#define LACUNA_CORE_NEAREST_H

/* Insertions, deletions, substitutions and swaps of neighbours that make b of a, upper and lower case alike; INT_MAX where a word has
   more than 64 bytes. */
int lac_edits(const char *a, const char *b);

#endif
