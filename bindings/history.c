/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The history, a file in the XDG state folder. Each input goes to it at once, in one write at the file's end, so that neither a second
   session nor a crash spoils it. Before each stands a line of its time, "#" and digits: what follows, up to the next such line, is one
   input, however many lines it has. */
#define _GNU_SOURCE
#include <ctype.h>
#include <errno.h>
#include <fcntl.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <time.h>
#include <unistd.h>

#include <readline/history.h>
#include <readline/readline.h>

#include "prompt.h"

enum { MOST_OF_PATH = 4096, MOST_KEPT = 5000 };

static char file_name[MOST_OF_PATH]; /* empty where there is none */

/* Makes the directories that lead to a path's last part, for the user alone. */
static bool make_directories(char *path) {
  for (char *slash = strchr(path + 1, '/'); slash; slash = strchr(slash + 1, '/')) {
    *slash = 0;
    bool there = mkdir(path, 0700) == 0 || errno == EEXIST;
    *slash = '/';
    if (!there) return false;
  }
  return true;
}

/* Where there is no such folder, or it is read-only, there is no history, in silence. */
static bool find_file(char *path) {
  const char *state = getenv("XDG_STATE_HOME"), *home = getenv("HOME");
  int length;
  if (state && *state == '/') length = snprintf(path, MOST_OF_PATH, "%s/lacuna/history", state);
  else if (home && *home == '/') length = snprintf(path, MOST_OF_PATH, "%s/.local/state/lacuna/history", home);
  else return false;
  return length < MOST_OF_PATH && make_directories(path);
}

static bool is_time_line(const char *line) {
  size_t digits = strspn(line + (*line == '#'), "0123456789");
  return *line == '#' && digits > 0 && strchr("\n", line[1 + digits]) != NULL;
}

static void add_without_line_end(char *input) {
  size_t length = strlen(input);
  if (length > 0 && input[length - 1] == '\n') input[length - 1] = 0;
  if (*input) add_history(input);
}

/* Adds the inputs in a file's text, which is cut up meanwhile. */
static void add_inputs(char *text) {
  char *input = NULL;
  for (char *line = text, *next; line && *line; line = next) {
    next = strchr(line, '\n');
    if (next) next++;
    if (!is_time_line(line)) continue;
    *line = 0; /* the end of the input before it */
    if (input) add_without_line_end(input);
    input = next;
  }
  if (input) add_without_line_end(input);
}

/* The whole file, ending in zero; NULL if there is none. */
static char *read_file(const char *name) {
  int file = open(name, O_RDONLY | O_CLOEXEC);
  struct stat facts;
  char *text = NULL;
  if (file >= 0 && fstat(file, &facts) == 0 && facts.st_size > 0) text = malloc((size_t)facts.st_size + 1);
  ssize_t length = text ? read(file, text, (size_t)facts.st_size) : 0;
  if (file >= 0) close(file);
  if (text) text[length < 0 ? 0 : length] = 0;
  return text;
}

void history_start(void) {
  using_history();
  stifle_history(MOST_KEPT);
  if (!find_file(file_name)) *file_name = 0;
  char *text = *file_name ? read_file(file_name) : NULL;
  if (text) add_inputs(text);
  free(text);
}

/* The input as it stands in the file: a line of it that looks like one of time gets a space. */
static char *entry_of(const char *input) {
  char *entry, *end;
  if (asprintf(&entry, "#%lld\n", (long long)time(NULL)) < 0) return NULL;
  size_t length = strlen(entry);
  end = realloc(entry, length + 2 * strlen(input) + 2);
  if (!end) return free(entry), NULL;
  entry = end, end += length;
  for (const char *line = input, *next; line; line = next) {
    next = strchr(line, '\n');
    size_t count = next ? (size_t)(next++ - line) : strlen(line);
    end = mempcpy(end, line, count);
    if (is_time_line(line)) *end++ = ' ';
    *end++ = '\n';
  }
  *end = 0;
  return entry;
}

/* Appends the input to the file. */
static void write_entry(const char *input) {
  char *entry = entry_of(input);
  if (!entry) return;
  int file = open(file_name, O_WRONLY | O_APPEND | O_CREAT | O_CLOEXEC, 0600);
  if (file >= 0) {
    if (write(file, entry, strlen(entry)) != (ssize_t)strlen(entry)) rl_ding();
    close(file);
  }
  free(entry);
}

/* What was pasted often ends in blank lines. */
static char *without_blank_end(const char *input) {
  size_t length = strlen(input);
  while (length > 0 && isspace((unsigned char)input[length - 1])) length--;
  return strndup(input, length);
}

void history_remember(const char *input) {
  HIST_ENTRY *last = history_length ? history_get(history_base + history_length - 1) : NULL;
  char *kept = without_blank_end(input);
  if (kept && *kept && (last == NULL || strcmp(last->line, kept) != 0)) {
    add_history(kept);
    if (*file_name) write_entry(kept);
  }
  free(kept);
}
