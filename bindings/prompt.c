/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Reading a line at a terminal, on readline. Its callback interface with ppoll, and SIGINT blocked but there, is the one way in which
   neither a Ctrl-C nor what is typed after it gets lost. Signals that concern the terminal only set a flag; they are answered where
   nothing is under way. */
#define _GNU_SOURCE
#include "prompt.h"

#include <errno.h>
#include <poll.h>
#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include <readline/readline.h>

#include "program.h"

/* readline's callbacks have no context. */
static char *typed;
static bool finished;
static volatile sig_atomic_t continued, resized, ending, reading; /* ending: the signal that wants the program to end */
static const int endings[] = {SIGHUP, SIGQUIT, SIGTERM};

static void take_line(char *line) {
  typed = line;
  finished = true;
  rl_callback_handler_remove();
}

static void on_continue(int number) {
  (void)number;
  continued = resized = 1;
}

static void on_resize(int number) {
  (void)number;
  resized = 1;
}

/* While a line is read the terminal has our settings, and these signals come through in ppoll alone. */
static void on_ending(int number) {
  ending = number;
  if (reading) return;
  signal(number, SIG_DFL);
  raise(number);
}

/* Ends as the signal would have it, once the terminal has its own settings again. */
static void end_by_signal(void) {
  sigset_t all;
  rl_callback_handler_remove();
  fputc('\n', rl_outstream);
  fflush(rl_outstream);
  signal(ending, SIG_DFL);
  raise(ending);
  sigemptyset(&all);
  sigprocmask(SIG_SETMASK, &all, NULL);
}

/* After Ctrl-Z and fg the terminal has the shell's settings, and perhaps another size. */
static void take_terminal_back(void) {
  continued = 0;
  rl_deprep_terminal();
  rl_prep_terminal(1);
  rl_forced_update_display();
}

static void take_size(void) {
  resized = 0;
  rl_resize_terminal();
}

/* The terminal stays as it is for the next line: with the shell's settings in between, a Ctrl-D typed just then would be lost. */
static void cancel_line(void) {
  rl_callback_sigcleanup();
  rl_free_line_state();
  rl_point = rl_end;
  rl_redisplay();
  fputs("^C\n", rl_outstream);
}

/* A ppoll that finds input doesn't let a waiting signal in, and what is typed after a Ctrl-C must not be read before it. */
static void let_interruption_in(const sigset_t *open) {
  sigset_t waiting, mask;
  sigpending(&waiting);
  if (!sigismember(&waiting, SIGINT)) return;
  sigprocmask(SIG_SETMASK, open, &mask);
  sigprocmask(SIG_SETMASK, &mask, NULL);
}

static reply read_line(const char *prompt, const sigset_t *open, char **line) {
  rl_callback_handler_install(prompt, take_line);
  while (!finished) {
    struct pollfd input = {.fd = STDIN_FILENO, .events = POLLIN};
    const int ready = ppoll(&input, 1, NULL, open);
    const bool failed = ready < 0 && errno != EINTR;
    if (ready > 0) let_interruption_in(open);
    if (ending) end_by_signal();
    if (program_was_interrupted()) return cancel_line(), CANCELLED;
    if (continued) take_terminal_back();
    if (resized) take_size();
    if (ready > 0) rl_callback_read_char();
    else if (failed) return rl_callback_handler_remove(), END;
  }
  *line = typed;
  return typed ? LINE : END;
}

/* Signals are let in while there is nothing to read. */
reply prompt_read_line(const char *prompt, const char *earlier, char **line) {
  sigset_t closed, before, open;
  sigemptyset(&closed);
  for (size_t i = 0; i < sizeof endings / sizeof endings[0]; i++) sigaddset(&closed, endings[i]);
  sigprocmask(SIG_BLOCK, &closed, &before);
  open = before;
  sigdelset(&open, SIGINT);
  typed = NULL;
  finished = false;
  completion_set_context(earlier);
  if (resized) resized = 0, rl_reset_screen_size(); /* while code ran */
  reading = 1;
  const reply answer = read_line(prompt, &open, line);
  reading = 0;
  sigprocmask(SIG_SETMASK, &before, NULL);
  return answer;
}

/* What the program was started to ignore, as nohup does, it goes on to ignore. */
static void answer_signal(int number, void (*handler)(int)) {
  struct sigaction action = {.sa_handler = handler, .sa_flags = SA_RESTART}, present;
  sigemptyset(&action.sa_mask);
  if (sigaction(number, NULL, &present) == 0 && present.sa_handler != SIG_IGN) sigaction(number, &action, NULL);
}

void prompt_start(void) {
  sigset_t interruption;
  sigemptyset(&interruption);
  sigaddset(&interruption, SIGINT);
  sigprocmask(SIG_BLOCK, &interruption, NULL);
  answer_signal(SIGCONT, on_continue);
  answer_signal(SIGWINCH, on_resize);
  for (size_t i = 0; i < sizeof endings / sizeof endings[0]; i++) answer_signal(endings[i], on_ending);
  rl_readline_name = "lacuna";
  rl_catch_signals = rl_catch_sigwinch = 0;
  rl_change_environment = 0; /* COLUMNS, once set, would hide a later size from what is printed */
  rl_instream = stdin;
  rl_outstream = isatty(STDOUT_FILENO) ? stdout : stderr;
}
