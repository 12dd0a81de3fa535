/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Inputs of several lines that stand in the editor at once, as they come back from the history or are pasted: the arrows go from line to
   line, and Meta-Enter begins a new one. Arrow after arrow walks through the history, whatever it has; once another key was pressed,
   they move within the input. */
#include <stdbool.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <readline/readline.h>

#include "prompt.h"

static bool walking; /* the last arrow went through the history */
static int column;   /* where the arrows aim, also past shorter lines */

static bool inside_character(int place) { return ((unsigned char)rl_line_buffer[place] & 0xc0) == 0x80; }

static int line_start(int place) {
  while (place > 0 && rl_line_buffer[place - 1] != '\n') place--;
  return place;
}

/* Puts the cursor at the column, in characters, of the line that begins at start, or at its end. */
static void go_to(int start) {
  int before = column;
  for (rl_point = start; rl_line_buffer[rl_point] && rl_line_buffer[rl_point] != '\n'; rl_point++)
    if (!inside_character(rl_point) && before-- == 0) return;
}

static void aim(void) {
  column = 0;
  for (int i = line_start(rl_point); i < rl_point; i++) column += !inside_character(i);
}

static bool go_up(void) {
  const int start = line_start(rl_point);
  if (start > 0) go_to(line_start(start - 1));
  return start > 0;
}

static bool go_down(void) {
  const char *end = strchr(rl_line_buffer + rl_point, '\n');
  if (end) go_to((int)(end - rl_line_buffer) + 1);
  return end != NULL;
}

static int line_up(int count, int key);
static int line_down(int count, int key);

static int move(bool (*go)(void), rl_command_func_t *through_history, int count, int key) {
  const bool arrow_after_arrow = rl_last_func == line_up || rl_last_func == line_down;
  if (!arrow_after_arrow || walking) aim();
  if (!(arrow_after_arrow && walking) && go()) return walking = false, 0;
  walking = true;
  return through_history(count, key);
}

static int line_up(int count, int key) { return move(go_up, rl_get_previous_history, count, key); }
static int line_down(int count, int key) { return move(go_down, rl_get_next_history, count, key); }

static int new_line(int count, int key) {
  (void)count, (void)key;
  return rl_insert_text("\n"), 0;
}

void lines_start(void) {
  static const struct {
    const char *keys;
    rl_command_func_t *function;
  } bindings[] = {{"\\e[A", line_up}, {"\\eOA", line_up}, {"\\e[B", line_down}, {"\\eOB", line_down}, {"\\e\\C-m", new_line}};
  for (size_t i = 0; i < sizeof bindings / sizeof bindings[0]; i++) rl_bind_keyseq(bindings[i].keys, bindings[i].function);
}
