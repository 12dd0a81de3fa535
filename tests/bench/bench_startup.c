/* SPDX-License-Identifier: GPL-3.0-or-later */
/* How long `lacuna -e ''` takes beside `lua5.4 -e ''`, and its memory. Runs alternate, and the best of each counts: the rest is noise. */
#define _GNU_SOURCE
#include <spawn.h>
#include <stdio.h>
#include <stdlib.h>
#include <sys/resource.h>
#include <sys/wait.h>
#include <time.h>
#include <unistd.h>

static const double most_ratio = 2.0;
static const double most_mebibytes = 6.0;
enum { RUNS = 200 };

/* One run. Returned: seconds by the clock; *mebibytes the greatest resident memory. Negative if it failed. */
static double once(char *program, double *mebibytes) {
  char *arguments[] = {program, "-e", "", NULL};
  struct timespec start, end;
  struct rusage used;
  pid_t child;
  int status;
  clock_gettime(CLOCK_MONOTONIC, &start);
  if (posix_spawnp(&child, program, NULL, NULL, arguments, environ) != 0) return -1;
  if (wait4(child, &status, 0, &used) < 0 || status != 0) return -1;
  clock_gettime(CLOCK_MONOTONIC, &end);
  *mebibytes = (double)used.ru_maxrss / 1024;
  return (double)(end.tv_sec - start.tv_sec) + 1e-9 * (double)(end.tv_nsec - start.tv_nsec);
}

static int row(const char *what, double most, double measured, const char *unit) {
  int good = measured <= most;
  printf("%-52s at most %6.2f %-8s %6.2f %s\n", what, most, unit, measured, good ? "good" : "FALLS SHORT");
  return !good;
}

int main(void) {
  char *lua = getenv("LUA"), *lacuna = getenv("LACUNA");
  double best_lua = 1e9, best_lacuna = 1e9, memory_lua = 0, memory = 0;
  if (lua == NULL) lua = "lua5.4";
  if (lacuna == NULL) lacuna = "build/lacuna";
  for (int i = 0; i < RUNS; i++) {
    double seconds_lua = once(lua, &memory_lua), seconds = once(lacuna, &memory);
    if (seconds_lua < 0 || seconds < 0) return fprintf(stderr, "%s or %s did not run\n", lua, lacuna), 1;
    if (seconds_lua < best_lua) best_lua = seconds_lua;
    if (seconds < best_lacuna) best_lacuna = seconds;
  }
  printf("start-up: %s %.2f ms, lacuna %.2f ms\n", lua, best_lua * 1e3, best_lacuna * 1e3);
  int short_of = row("lacuna -e '', times lua5.4 -e ''", most_ratio, best_lacuna / best_lua, "times");
  return short_of | row("its resident memory", most_mebibytes, memory, "MiB");
}
