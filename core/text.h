/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Text in and out, for unit strings and readings. Written into a buffer of fixed size, it is always ended by zero; what
   does not fit whole is left out with all that follows, so that no UTF-8 character is cut in two. */
#ifndef LACUNA_CORE_TEXT_H
#define LACUNA_CORE_TEXT_H

#include <locale.h>
#include <stdarg.h>
#include <stdbool.h>
#include <stddef.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

typedef struct {
  char *buffer;
  size_t size, used;
  bool full;
} lac_text;

static inline lac_text lac_text_in(char *buffer, size_t size) {
  if (size > 0) buffer[0] = 0;
  return (lac_text){buffer, size, 0, size == 0};
}

static inline void lac_text_add_bytes(lac_text *text, const char *bytes, size_t length) {
  if (text->full || length >= text->size - text->used) {
    text->full = true;
    return;
  }
  memcpy(text->buffer + text->used, bytes, length);
  text->used += length;
  text->buffer[text->used] = 0;
}

static inline void lac_text_add(lac_text *text, const char *string) { lac_text_add_bytes(text, string, strlen(string)); }

/* For short pieces, up to 63 bytes. */
__attribute__((format(printf, 2, 3))) static inline void lac_text_format(lac_text *text, const char *format, ...) {
  char piece[64];
  va_list arguments;
  va_start(arguments, format);
  int length = vsnprintf(piece, sizeof piece, format, arguments);
  va_end(arguments);
  if (length < 0 || (size_t)length >= sizeof piece) text->full = true;
  else lac_text_add_bytes(text, piece, (size_t)length);
}

/* A piece of text being read from the left; it need not end in zero. */
typedef struct {
  const char *text;
  size_t length, at;
} lac_scan;

static inline char lac_scan_peek(const lac_scan *scan, size_t ahead) {
  return scan->at + ahead < scan->length ? scan->text[scan->at + ahead] : 0;
}

static inline bool lac_scan_digit(const lac_scan *scan, size_t ahead) {
  char c = lac_scan_peek(scan, ahead);
  return c >= '0' && c <= '9';
}

/* The token's length if the text goes on with it, else 0. */
static inline size_t lac_scan_starts(const lac_scan *scan, const char *token) {
  size_t length = strlen(token);
  return scan->length - scan->at >= length && memcmp(scan->text + scan->at, token, length) == 0 ? length : 0;
}

static inline bool lac_scan_take(lac_scan *scan, const char *token) {
  size_t length = lac_scan_starts(scan, token);
  scan->at += length;
  return length > 0;
}

/* Spaces as people and their editors set them: also the tab, no-break, thin and narrow no-break space. Returns whether there were any. */
static inline bool lac_scan_spaces(lac_scan *scan) {
  size_t start = scan->at;
  while (lac_scan_take(scan, " ") || lac_scan_take(scan, "\t") || lac_scan_take(scan, "\u00a0") || lac_scan_take(scan, "\u2009") ||
         lac_scan_take(scan, "\u202f"))
    continue;
  return scan->at > start;
}

/* The bytes from here of  digits [. digits] [e [sign] digits] , either side of the point possibly empty; 0 where no number starts. */
static inline size_t lac_scan_number(const lac_scan *scan) {
  size_t n = 0, digits = 0;
  for (; lac_scan_digit(scan, n); n++) digits++;
  if (lac_scan_peek(scan, n) == '.') {
    n++;
    for (; lac_scan_digit(scan, n); n++) digits++;
  }
  if (digits == 0) return 0;
  if (lac_scan_peek(scan, n) == 'e' || lac_scan_peek(scan, n) == 'E') {
    size_t sign = lac_scan_peek(scan, n + 1) == '+' || lac_scan_peek(scan, n + 1) == '-';
    if (lac_scan_digit(scan, n + 1 + sign))
      for (n += 1 + sign; lac_scan_digit(scan, n); n++) continue;
  }
  return n;
}

/* The value of such bytes followed by a second piece (an exponent, or nothing); false where they are more than 127. strtod, which
   rounds correctly, wants the decimal point of the host's locale. */
static inline bool lac_number_value(const char *bytes, size_t length, const char *more, size_t more_length, double *value) {
  enum { LONGEST = 127 };
  const char *point = localeconv()->decimal_point;
  char copy[LONGEST + 16];
  if (length > LONGEST || more_length > LONGEST - length) return false;
  lac_text text = lac_text_in(copy, sizeof copy);
  for (size_t i = 0; i < length; i++) {
    if (bytes[i] == '.') lac_text_add(&text, point);
    else lac_text_add_bytes(&text, bytes + i, 1);
  }
  lac_text_add_bytes(&text, more, more_length);
  *value = strtod(copy, NULL);
  return !text.full;
}

#endif
