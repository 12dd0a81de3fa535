/* SPDX-License-Identifier: GPL-3.0-or-later */
/* What the files of the conversation share: reading a line at the terminal, the history, completion. */
#ifndef LACUNA_PROMPT_H
#define LACUNA_PROMPT_H

#include <lua.h>
#include <stdbool.h>

typedef enum { LINE, END, CANCELLED } reply;

/* Sets readline and the signals up. SIGINT is blocked from now on: it is let in where a line is read, and by the caller where code runs. */
void prompt_start(void);

/* Reads one line into *line (malloc's). earlier: the lines of the same input before it, NULL where it is the first. */
reply prompt_read_line(const char *prompt, const char *earlier, char **line);

/* Keys for inputs of several lines. */
void lines_start(void);

/* The inputs of earlier sessions, for the arrow keys; and one more. */
void history_start(void);
void history_remember(const char *input);

/* Tab. Completion asks Lua, but calls no code of the user's: no hook, no finaliser. */
void completion_start(lua_State *L);
void completion_set_context(const char *earlier); /* as of prompt_read_line; not copied */

#endif
