/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The command line. The table of options is the single source of --help and of the manual page. */
#ifndef LACUNA_OPTIONS_H
#define LACUNA_OPTIONS_H

#include <lua.h>
#include <stdbool.h>

enum { FAILED = 1, WRONG_USAGE = 2 };

typedef enum {
  OPTION_SETTING, /* of the module, by the option's name */
  OPTION_STUDY,   /* of a study, handed on by the option's name */
  OPTION_CODE,    /* ends the options: the words after it are the code's arguments */
  OPTION_LEAVE,   /* prints something and leaves */
} option_kind;

typedef struct {
  const char *name;     /* "--draws", "-e" */
  const char *argument; /* what stands after it, as --help writes it; NULL: nothing */
  const char *wants;    /* what the argument is, in an error message */
  option_kind kind;
  const char *meaning;
} option;

extern const option options[]; /* ends with name NULL */

typedef struct {
  const option *option;
  const char *text; /* its argument, or NULL */
} given_option;

typedef struct {
  given_option *given; /* in the order of the command line; malloc's */
  int given_count;
  const char *code;    /* of -e, or NULL */
  char **rest;         /* the script and its arguments; or the arguments alone, after -e; malloc's */
  int count;
} command_line;

/* Reads the command line. Options may stand before the script's name or after it; what follows "--" is left alone, and after the script so are
   options that are none of the program's. Returned: -1 to go on, else the exit status, with all said that there is to say. */
int command_line_read(command_line *line, char **argument);
void command_line_drop(command_line *line);

#endif
