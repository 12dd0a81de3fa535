/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The public headers against the tables: every row's function is declared, and the row's key stands beside it; every key that a header
   names is a row's; every function is documented by a row's key, or by a block that says what it returns and from which source. */
#include "check.h"

#include <ctype.h>
#include <glob.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "walk.h"

/* A header's paragraphs, apart by empty lines, each as a text of its own. */
enum { PARAGRAPHS = 400, LONGEST_KEY = 160 };
typedef struct {
  const char *text[PARAGRAPHS], *header[PARAGRAPHS];
  size_t count;
} paragraphs;

static paragraphs all;
static glob_t headers;

static char *read_all(const char *path) {
  FILE *file = fopen(path, "r");
  assert_non_null(file);
  assert_int_equal(fseek(file, 0, SEEK_END), 0);
  const size_t size = (size_t)ftell(file);
  char *text = calloc(size + 1, 1);
  assert_non_null(text);
  rewind(file);
  assert_int_equal(fread(text, 1, size, file), size);
  fclose(file);
  return text;
}

static int read_headers(void **state) {
  (void)state;
  assert_int_equal(glob("include/lacuna/*.h", 0, NULL, &headers), 0);
  for (size_t i = 0; i < headers.gl_pathc; i++) {
    for (char *rest = read_all(headers.gl_pathv[i]); rest;) {
      char *end = strstr(rest, "\n\n");
      if (end) *end = '\0';
      assert_true(all.count < PARAGRAPHS);
      all.header[all.count] = headers.gl_pathv[i];
      all.text[all.count++] = rest;
      rest = end ? end + 2 : NULL;
    }
  }
  return 0;
}

static bool is_key_letter(char c) { return islower((unsigned char)c) || isdigit((unsigned char)c) || c == '_' || c == '<' || c == '>'; }

/* Whether a pattern is a text; a mark such as <at> stands for any piece of it. */
static bool matches(const char *pattern, const char *text) {
  if (*pattern == '<') {
    const char *after = strchr(pattern, '>') + 1;
    do
      if (matches(after, text)) return true;
    while (*text++);
    return false;
  }
  return *pattern == *text && (!*pattern || matches(pattern + 1, text + 1));
}

/* The next key, "name/by", in a text: copied, and the text after it; NULL past the last. */
static const char *next_key(const char *text, char *key) {
  for (const char *slash; (slash = strchr(text, '/')); text = slash + 1) {
    const char *start = slash, *end = slash + 1;
    while (start > text && is_key_letter(start[-1])) start--;
    while (is_key_letter(*end)) end++;
    if (start == slash || end == slash + 1 || end - start >= LONGEST_KEY) continue;
    snprintf(key, LONGEST_KEY, "%.*s", (int)(end - start), start);
    return end;
  }
  return NULL;
}

static bool row_has_key(int row, const char *key) {
  char own[LONGEST_KEY];
  const lac_relation *r = lac_catalogue_row(catalogue, row);
  snprintf(own, sizeof own, "%s/%s", r->gives, r->by);
  return matches(key, own);
}

static bool names_row(const char *paragraph, int row) {
  char key[LONGEST_KEY];
  while ((paragraph = next_key(paragraph, key)))
    if (row_has_key(row, key)) return true;
  return false;
}

/* Whether a function is declared in a paragraph: its name with a bracket after it. */
static bool declares(const char *paragraph, const char *function) {
  const size_t length = strlen(function);
  for (const char *at = paragraph; (at = strstr(at, function)); at += length)
    if (at[length] == '(' && at > paragraph && !is_key_letter(at[-1])) return true;
  return false;
}

static void functions_of_rows_are_declared_beside_their_key(void **state) {
  (void)state;
  int functions = 0;
  for (int row = 0; row < lac_catalogue_rows(catalogue); row++) {
    const char *function = lac_catalogue_row(catalogue, row)->function_name;
    if (!function) continue;
    bool declared = false, named = false;
    for (size_t i = 0; i < all.count; i++) {
      if (!declares(all.text[i], function)) continue;
      declared = true;
      named |= names_row(all.text[i], row);
    }
    functions++;
    expect_row(declared, row, "has a function that no header declares");
    expect_row(!declared || named, row, "is not named beside its function's declaration");
  }
  assert_true(functions > 0);
  end_walk();
}

/* Whether a key's first part is a name of the glossary, or has a mark: else it is a fraction in a comment. */
static bool looks_like_key(const char *key) {
  char name[LONGEST_KEY];
  snprintf(name, sizeof name, "%.*s", (int)strcspn(key, "/"), key);
  return strchr(name, '<') || lac_catalogue_find(catalogue, name) >= 0;
}

static void keys_in_headers_are_those_of_rows(void **state) {
  (void)state;
  char key[LONGEST_KEY];
  int keys = 0;
  for (size_t i = 0; i < all.count; i++) {
    for (const char *text = all.text[i]; (text = next_key(text, key));) {
      if (!looks_like_key(key)) continue;
      bool found = false;
      for (int row = 0; row < lac_catalogue_rows(catalogue) && !found; row++) found = row_has_key(row, key);
      keys++;
      expect(found, all.header[i], key, "there is no such row");
    }
  }
  assert_true(keys > 0);
  end_walk();
}

static bool is_function_of_row(const char *function, size_t length) {
  for (int row = 0; row < lac_catalogue_rows(catalogue); row++) {
    const char *name = lac_catalogue_row(catalogue, row)->function_name;
    if (name && strlen(name) == length && strncmp(name, function, length) == 0) return true;
  }
  return false;
}

/* Whether a header is about a subject of the field: it declares a function of some row. */
static bool has_relations(const char *header) {
  for (int row = 0; row < lac_catalogue_rows(catalogue); row++) {
    const char *function = lac_catalogue_row(catalogue, row)->function_name;
    for (size_t i = 0; i < all.count && function; i++)
      if (strcmp(all.header[i], header) == 0 && declares(all.text[i], function)) return true;
  }
  return false;
}

/* What computes one number and belongs to no row. */
static void check_other_functions(const char *header, const char *paragraph) {
  static const char start[] = "double lac_";
  const bool block = (strstr(paragraph, "Result:") || strstr(paragraph, "Returned:")) && strstr(paragraph, "Source:");
  for (const char *at = paragraph; (at = strstr(at, start)); at += sizeof start) {
    const char *function = strchr(at, ' ') + 1;
    const size_t length = strcspn(function, "(");
    char name[LONGEST_KEY];
    snprintf(name, sizeof name, "%.*s", (int)length, function);
    if (at > paragraph && at[-1] != '\n') continue;
    expect(block || is_function_of_row(function, length), header, name, "belongs to no row and has no block with its result and source");
  }
}

static void other_functions_have_a_block(void **state) {
  (void)state;
  int subjects = 0;
  for (size_t h = 0; h < headers.gl_pathc; h++) {
    if (!has_relations(headers.gl_pathv[h])) continue;
    subjects++;
    for (size_t i = 0; i < all.count; i++)
      if (all.header[i] == headers.gl_pathv[h]) check_other_functions(all.header[i], all.text[i]);
  }
  assert_true(subjects > 0);
  end_walk();
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  const struct CMUnitTest tests[] = {
      FRESH(functions_of_rows_are_declared_beside_their_key),
      FRESH(keys_in_headers_are_those_of_rows),
      FRESH(other_functions_have_a_block),
  };
  return cmocka_run_group_tests(tests, read_headers, NULL);
}
