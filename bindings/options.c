/* SPDX-License-Identifier: GPL-3.0-or-later */
#include "options.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "nearest.h"

const option options[] = {
    {"-e", "CODE", "code", OPTION_CODE, "run CODE; if it is an expression, print its value"},
    {"--seed", "N", "a whole number", OPTION_SETTING, "key of the random draws; the same seed gives the same draws, on any number of threads"},
    {"--draws", "N", "a whole number", OPTION_SETTING, "how many draws stand for an error bar"},
    {"--threads", "N", "a whole number", OPTION_SETTING, "how many processor cores to use"},
    {"--out", "DIR", "a folder", OPTION_STUDY, "write the study's report into this folder"},
    {"--set", "NAME=VALUE", "NAME=VALUE", OPTION_STUDY, "give this in the study, whatever its file says: 'distance=120 pc', or 'baseline=20 m:330 m:100' for 100 values between; as often as need be"},
    {"--only", "NAME", "a target's name", OPTION_STUDY, "of the study's targets this one; as often as need be"},
    {"--resume", NULL, NULL, OPTION_STUDY, "go on with a run into --out that was stopped"},
    {"--force", NULL, NULL, OPTION_STUDY, "write into --out though it isn't empty"},
    {"--shard", "K/N", "K/N, like 3/16,", OPTION_STUDY, "work out the K-th of N parts of the targets into --out; merge puts them together"},
    {"--help", NULL, NULL, OPTION_LEAVE, "print this and leave"},
    {"--version", NULL, NULL, OPTION_LEAVE, "print the version and leave"},
    {NULL, NULL, NULL, OPTION_LEAVE, NULL},
};

static const char head[] = "Usage: lacuna [OPTION...] [FILE.lua [ARGUMENT...]]\n"
                           "       lacuna [OPTION...] -e CODE [ARGUMENT...]\n"
                           "       lacuna merge DIR... --out DIR\n"
                           "What can be resolved around a young star: runs a script, a line of code, or,\n"
                           "alone at a terminal, a conversation (help() tells more there).\n"
                           "\n"
                           "  -               read the script from standard input\n";
static const char tail[] = "\nOptions may also stand after the script's name; what follows -- is left to the script.\n"
                           "Exit status: 0, 1 if the script failed, 2 for wrong usage.\n";

/* An option and its meaning, folded at spaces to 80 columns. */
static void print_option(const option *one) {
  enum { INDENT = 18, WIDTH = 80 };
  int column = printf("  %s%s%s", one->name, one->argument ? " " : "", one->argument ? one->argument : "");
  if (column > INDENT - 2) column = printf("\n") - 1;
  column += printf("%*s", INDENT - column, "");
  for (const char *word = one->meaning; *word;) {
    int length = (int)strcspn(word, " ");
    if (column > INDENT && column + length >= WIDTH) column = printf("\n%*s", INDENT, "") - 1;
    column += printf("%s%.*s", column > INDENT ? " " : "", length, word);
    word += length;
    word += *word == ' ';
  }
  putchar('\n');
}

static int print_help(void) {
  fputs(head, stdout);
  for (const option *one = options; one->name; one++) print_option(one);
  fputs(tail, stdout);
  return 0;
}

static int unknown_option(const char *argument) {
  int length = (int)strcspn(argument, "="), least = 3; /* two slips of the finger, no more */
  const char *nearest = NULL;
  char name[66];
  snprintf(name, sizeof name, "%.*s", length, argument);
  for (const option *one = options; one->name; one++) {
    int edits = strlen(one->name) > 2 ? lac_edits(name, one->name) : least;
    if (edits < least) least = edits, nearest = one->name;
  }
  if (nearest) fprintf(stderr, "lacuna: unknown option '%s'; the nearest known one is %s\n", name, nearest);
  else fprintf(stderr, "lacuna: unknown option '%.*s'; lacuna --help lists them\n", length, argument);
  return WRONG_USAGE;
}

/* The option that an argument like "--draws" or "--draws=5" names, with the text after "=" or NULL; NULL if none. */
static const option *find_option(const char *argument, const char **text) {
  for (const option *one = options; one->name; one++) {
    size_t length = strlen(one->name);
    if (strncmp(argument, one->name, length) != 0) continue;
    bool joined = argument[length] == '=' && one->argument && length > 2;
    if (argument[length] != 0 && !joined) continue;
    *text = joined ? argument + length + 1 : NULL;
    return one;
  }
  return NULL;
}

static int leave(const option *one) {
  if (strcmp(one->name, "--help") == 0) return print_help();
  return puts("lacuna " LAC_VERSION "\nLicence GPL-3.0-or-later; there is no warranty."), 0;
}

static void take_rest(command_line *line, char **argument) {
  while (*argument) line->rest[line->count++] = *argument++;
}

int command_line_read(command_line *line, char **argument) {
  size_t most = 1;
  while (argument[most - 1]) most++;
  *line = (command_line){.given = calloc(most, sizeof *line->given), .rest = calloc(most, sizeof *line->rest)};
  if (line->given == NULL || line->rest == NULL) return fputs("lacuna: out of memory\n", stderr), FAILED;
  for (; *argument; argument++) {
    const char *text;
    if (strcmp(*argument, "--") == 0) return take_rest(line, argument + 1), -1;
    const option *one = find_option(*argument, &text);
    bool after_script = line->count > 0;
    if (one == NULL && **argument == '-' && strcmp(*argument, "-") != 0 && !after_script) return unknown_option(*argument);
    if (one == NULL || (after_script && (one->kind == OPTION_CODE || one->kind == OPTION_LEAVE))) {
      line->rest[line->count++] = *argument;
      continue;
    }
    if (one->kind == OPTION_LEAVE) return leave(one);
    if (one->argument && text == NULL && argument[1]) text = *++argument;
    if (one->argument && text == NULL) return fprintf(stderr, "lacuna: %s wants %s after it; got nothing\n", one->name, one->wants), WRONG_USAGE;
    if (one->kind == OPTION_CODE) return line->code = text, take_rest(line, argument + 1), -1;
    line->given[line->given_count++] = (given_option){.option = one, .text = text};
  }
  return -1;
}

void command_line_drop(command_line *line) {
  free(line->given);
  free(line->rest);
}
