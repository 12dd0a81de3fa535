/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Worker processes of the program. A study's targets are independent, and a Lua state has one thread; so copies of the process work each on
   the next target that nobody has taken, and hand back texts through pipes. A child has none of the parent's threads, and computes on one
   (state.c). It never returns to the script: it ends without the host's exit handlers, as Lua's and stdio's state are the parent's. */
#define _GNU_SOURCE
#include <errno.h>
#include <fcntl.h>
#include <lauxlib.h>
#include <poll.h>
#include <signal.h>
#include <stdatomic.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/ioctl.h>
#include <sys/mman.h>
#include <sys/prctl.h>
#include <sys/resource.h>
#include <sys/wait.h>
#include <time.h>
#include <unistd.h>

#include "binding.h"
#include "program.h"

enum { MOST_WORKERS = 256, TICK_MS = 100 };
#define EARLY "a worker process ended early"

/* In front of each text in a pipe. */
typedef struct {
  uint64_t length;
  int32_t task; /* from 1; 0: the text is an error that ended the child */
} frame;

typedef struct {
  pid_t pid; /* 0: ended and reaped */
  int pipe;  /* -1: closed */
  char *text;
  size_t have, room;
} worker;

typedef struct {
  atomic_int *next; /* shared with the children: the last task taken */
  int count, done;  /* done: tasks whose texts have come */
  long peak; /* KiB, of the children that have ended */
  worker workers[MOST_WORKERS];
} crew;

/* The children that still work are killed: they hold nothing that is not lost anyhow. */
static void end_crew(crew *all) {
  for (int i = 0; i < all->count; i++) {
    worker *one = &all->workers[i];
    if (one->pid > 0) kill(one->pid, SIGKILL);
    if (one->pipe >= 0) close(one->pipe);
    if (one->pid > 0)
      while (waitpid(one->pid, NULL, 0) < 0 && errno == EINTR) continue;
    free(one->text);
    *one = (worker){.pipe = -1};
  }
  if (all->next != NULL) munmap(all->next, sizeof *all->next);
  all->next = NULL;
}

static int crew_finalise(lua_State *L) { return end_crew(lua_touserdata(L, 1)), 0; }

static crew *push_crew(lua_State *L) {
  crew *all = lua_newuserdatauv(L, sizeof *all, 0);
  memset(all, 0, sizeof *all);
  lua_createtable(L, 0, 2);
  lua_pushcfunction(L, crew_finalise), lua_setfield(L, -2, "__gc");
  lua_pushcfunction(L, crew_finalise), lua_setfield(L, -2, "__close");
  lua_setmetatable(L, -2);
  lua_toclose(L, -1); /* whatever is raised, no child goes on */
  void *shared = mmap(NULL, sizeof *all->next, PROT_READ | PROT_WRITE, MAP_SHARED | MAP_ANONYMOUS, -1, 0);
  if (shared == MAP_FAILED) lac_error(L, "cannot start workers: %s", strerror(errno));
  all->next = shared;
  return all;
}

/* The child. */

static bool send_all(int pipe, const void *data, size_t length) {
  const char *at = data;
  while (length > 0) {
    const ssize_t sent = write(pipe, at, length);
    if (sent < 0 && errno == EINTR) continue;
    if (sent < 0) return false;
    at += sent;
    length -= (size_t)sent;
  }
  return true;
}

static bool send_text(lua_State *L, int pipe, int task) {
  size_t length = 0;
  const char *text = lua_tolstring(L, -1, &length);
  const frame head = {.length = length, .task = task};
  return send_all(pipe, &head, sizeof head) && send_all(pipe, text, length);
}

/* Works until no task is left; the function is at place `work`. Never returns. */
static void be_worker(lua_State *L, crew *all, pid_t parent, int tasks, int work, int pipe) {
  signal(SIGINT, SIG_DFL); /* Ctrl-C reaches it too, and has nothing to tell the script here */
  all->count = 0;          /* the others aren't this one's to end, should the script leave here */
  prctl(PR_SET_PDEATHSIG, SIGKILL);
  if (getppid() != parent) _exit(1); /* it was gone before that was said */
  for (int task; (task = atomic_fetch_add(all->next, 1) + 1) <= tasks; lua_pop(L, 1)) {
    lua_pushvalue(L, work);
    lua_pushinteger(L, task);
    const bool good = lua_pcall(L, 1, 1, 0) == LUA_OK;
    if (!send_text(L, pipe, good ? task : 0) || !good) _exit(1);
  }
  fflush(stdout); /* what a relation of the user's printed */
  _exit(0);
}

static void start(lua_State *L, crew *all, int count, int tasks, int work) {
  const pid_t parent = getpid();
  fflush(NULL); /* else the children have a copy of what waits to be written */
  for (int i = 0; i < count; i++) {
    int ends[2];
    if (pipe2(ends, O_CLOEXEC) != 0) lac_error(L, "cannot start workers: %s", strerror(errno));
    const pid_t pid = fork();
    if (pid == 0) be_worker(L, all, parent, tasks, work, ends[1]);
    const int trouble = errno;
    close(ends[1]);
    all->workers[all->count++] = (worker){.pid = pid > 0 ? pid : 0, .pipe = ends[0]};
    if (pid < 0) lac_error(L, "cannot start workers: %s", strerror(trouble));
  }
}

/* The parent. */

static bool make_room(worker *one) {
  if (one->room - one->have >= 1 << 16) return true;
  const size_t room = 2 * one->room + (1 << 16);
  char *text = realloc(one->text, room);
  if (text == NULL) return false;
  one->text = text;
  one->room = room;
  return true;
}

/* Hands the whole frames in a worker's buffer to the function at place `take`. Returned: whether all went well; else an error is on the
 * stack. */
static bool take_frames(lua_State *L, crew *all, worker *one, int take) {
  size_t at = 0;
  frame head;
  while (one->have - at >= sizeof head) {
    memcpy(&head, one->text + at, sizeof head);
    if (one->have - at - sizeof head < head.length) break;
    lua_pushvalue(L, take);
    lua_pushinteger(L, head.task);
    lua_pushlstring(L, one->text + at + sizeof head, (size_t)head.length);
    if (head.task == 0) return false;
    if (lua_pcall(L, 2, 0, 0) != LUA_OK) return false;
    all->done++;
    at += sizeof head + (size_t)head.length;
  }
  if (at > 0) memmove(one->text, one->text + at, one->have - at);
  one->have -= at;
  return true;
}

/* The child behind a pipe that has ended: how. */
static bool reap(lua_State *L, crew *all, worker *one) {
  int status = 0;
  struct rusage usage = {0};
  while (wait4(one->pid, &status, 0, &usage) < 0 && errno == EINTR) continue;
  close(one->pipe);
  one->pipe = -1;
  one->pid = 0;
  all->peak += usage.ru_maxrss;
  if (status == 0 && one->have == 0) return true;
  if (WIFSIGNALED(status))
    lua_pushfstring(L, "a worker process was stopped by signal %d (%s)", WTERMSIG(status), strsignal(WTERMSIG(status)));
  else lua_pushliteral(L, EARLY);
  return false;
}

/* Reads what a worker has sent. Returned as take_frames. */
static bool read_worker(lua_State *L, crew *all, worker *one, int take) {
  if (!make_room(one)) return lua_pushstring(L, lac_status_words(LAC_NO_MEMORY)), false;
  const ssize_t got = read(one->pipe, one->text + one->have, one->room - one->have);
  if (got < 0) return errno == EINTR || (lua_pushfstring(L, "cannot read from a worker: %s", strerror(errno)), false);
  if (got == 0) return reap(L, all, one);
  one->have += (size_t)got;
  return take_frames(L, all, one, take);
}

/* One round: waits for news for a tenth of a second at most. Returned: how many still work; -1 with an error on the stack. */
static int attend(lua_State *L, crew *all, int take, int tick) {
  struct pollfd waiting[MOST_WORKERS];
  int open = 0;
  for (int i = 0; i < all->count; i++) {
    waiting[i] = (struct pollfd){.fd = all->workers[i].pipe, .events = POLLIN};
    open += all->workers[i].pipe >= 0;
  }
  if (open == 0) return 0;
  const int ready = poll(waiting, (nfds_t)all->count, TICK_MS);
  if (program_was_interrupted()) { /* raised here: the hook would interrupt what closes on the way out */
    lua_sethook(L, NULL, 0, 0);
    return lua_pushliteral(L, "interrupted"), -1;
  }
  for (int i = 0; ready > 0 && i < all->count; i++)
    if (waiting[i].revents != 0 && !read_worker(L, all, &all->workers[i], take)) return -1;
  lua_pushvalue(L, tick);
  return lua_pcall(L, 0, 0, 0) == LUA_OK ? open : -1;
}

/* workers(count, tasks, work, take, tick): calls work(task) -> text for each task from 1 on in so many processes, take(task, text) here as
   they come, in any order, and tick() ten times a second. Returned: the memory that the processes took at most, together, in MB. */
static int run_workers(lua_State *L) {
  enum { COUNT = 1, TASKS, WORK, TAKE, TICK };
  const lua_Integer wanted = luaL_checkinteger(L, COUNT);
  const int count = wanted > MOST_WORKERS ? MOST_WORKERS : (int)wanted, tasks = (int)luaL_checkinteger(L, TASKS);
  lua_settop(L, TICK);
  crew *all = push_crew(L);
  start(L, all, count, tasks, WORK);
  for (int open; (open = attend(L, all, TAKE, TICK)) != 0;)
    if (open < 0) return end_crew(all), lua_error(L);
  if (all->done < tasks) return lua_pushliteral(L, EARLY), lua_error(L); /* a script can leave with 0 */
  lua_pushnumber(L, (lua_Number)all->peak / 1024);
  return 1;
}

/* clock(): seconds since some moment. */
static int clock_now(lua_State *L) {
  struct timespec now;
  clock_gettime(CLOCK_MONOTONIC, &now);
  lua_pushnumber(L, (lua_Number)now.tv_sec + (lua_Number)now.tv_nsec * 1e-9);
  return 1;
}

/* peak(): the memory that this process has taken at most, in MB. */
static int peak_memory(lua_State *L) {
  struct rusage usage;
  getrusage(RUSAGE_SELF, &usage);
  lua_pushnumber(L, (lua_Number)usage.ru_maxrss / 1024);
  return 1;
}

/* terminal(): the width of the terminal on standard error, if it is one on which a line can be redrawn. */
static int error_terminal(lua_State *L) {
  const char *kind = getenv("TERM");
  struct winsize size;
  if (!isatty(STDERR_FILENO) || kind == NULL || strcmp(kind, "dumb") == 0) return 0;
  lua_pushinteger(L, ioctl(STDERR_FILENO, TIOCGWINSZ, &size) == 0 && size.ws_col > 0 ? size.ws_col : 80);
  return 1;
}

void program_open_workers(lua_State *L) {
  static const luaL_Reg functions[] = {
      {"workers", run_workers}, {"clock", clock_now}, {"peak", peak_memory}, {"terminal", error_terminal}, {NULL, NULL}};
  luaL_setfuncs(L, functions, 0);
}
