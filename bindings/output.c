/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Where output goes: files that are whole or absent, folders, and the width of the terminal. */
#define _GNU_SOURCE /* strcasestr */
#include <dirent.h>
#include <errno.h>
#include <fcntl.h>
#include <limits.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/ioctl.h>
#include <sys/stat.h>
#include <unistd.h>

#include "binding.h"

static bool write_all(int file, const char *text, size_t length) {
  while (length > 0) {
    const ssize_t written = write(file, text, length);
    if (written < 0 && errno == EINTR) continue;
    if (written < 0) return false;
    text += written;
    length -= (size_t)written;
  }
  return true;
}

enum { SUFFIX = 48 };

/* A new file beside the one that is to be; its suffix goes to `suffix`. It gets the rights of any new file, by the process's mask. */
static int create_beside(const char *name, char *suffix) {
  int file = -1;
  errno = EEXIST;
  for (int i = 0; file < 0 && errno == EEXIST && i < 1000; i++) {
    snprintf(suffix, SUFFIX, ".unfinished-%ld-%d", (long)getpid(), i);
    file = open(name, O_WRONLY | O_CREAT | O_EXCL | O_CLOEXEC, 0666);
  }
  return file;
}

/* Writes under the name in `temporary`, which has room for a suffix, then gives the file its own, and the rights of the one that was there
   (0: there was none). No call in here can raise. */
static bool write_and_rename(const char *path, char *temporary, mode_t rights, const char *text, size_t length) {
  const int file = create_beside(temporary, temporary + strlen(temporary));
  if (file < 0) return false;
  bool good = (rights == 0 || fchmod(file, rights) == 0) && write_all(file, text, length);
  int trouble = good ? 0 : errno;
  if (close(file) != 0 && good) good = false, trouble = errno;
  if (good && rename(temporary, path) != 0) good = false, trouble = errno;
  if (!good) unlink(temporary), errno = trouble;
  return good;
}

/* A device or a pipe is written to; a file of that name must not take its place. */
static bool write_in_place(const char *path, const char *text, size_t length) {
  const int file = open(path, O_WRONLY | O_CLOEXEC);
  if (file < 0) return false;
  const int trouble = write_all(file, text, length) ? 0 : errno;
  if (close(file) != 0 && trouble == 0) return false;
  errno = trouble;
  return trouble == 0;
}

/* write_file(path, text): the file, or the one that a link leads to, holds the whole text, or what it held before. */
static int write_file(lua_State *L) {
  size_t length;
  const char *path = luaL_checkstring(L, 1), *text = luaL_checklstring(L, 2, &length);
  struct stat present = {0};
  bool good;
  lac_check_decimal_point(L, path);
  if (stat(path, &present) == 0 && !S_ISREG(present.st_mode)) {
    good = write_in_place(path, text, length);
  } else {
    char real[PATH_MAX];
    const char *final = realpath(path, real) ? real : path;
    char *temporary = strcpy(lua_newuserdatauv(L, strlen(final) + SUFFIX, 0), final);
    good = write_and_rename(final, temporary, present.st_mode & 0777, text, length);
  }
  return good ? 0 : lac_error(L, "cannot write %s: %s", path, strerror(errno));
}

/* make_folder(path): nothing where it is there already. */
static int make_folder(lua_State *L) {
  const char *path = luaL_checkstring(L, 1);
  struct stat present;
  if (mkdir(path, 0777) == 0 || (errno == EEXIST && stat(path, &present) == 0 && S_ISDIR(present.st_mode))) return 0;
  return lac_error(L, "cannot make the folder %s: %s", path, strerror(errno));
}

/* The open folder belongs to a userdata, so that a lack of memory on the way doesn't lose it. */
static int close_folder(lua_State *L) {
  DIR **folder = lua_touserdata(L, 1);
  if (*folder != NULL) closedir(*folder);
  *folder = NULL;
  return 0;
}

/* folder_entries(path): the names in it, in no order. */
static int folder_entries(lua_State *L) {
  const char *path = luaL_checkstring(L, 1);
  lua_settop(L, 1);
  DIR **folder = lua_newuserdatauv(L, sizeof *folder, 0);
  *folder = NULL;
  lua_createtable(L, 0, 1);
  lua_pushcfunction(L, close_folder), lua_setfield(L, -2, "__gc");
  lua_setmetatable(L, 2);
  lua_newtable(L);
  *folder = opendir(path);
  if (*folder == NULL) return lac_error(L, "cannot read the folder %s: %s", path, strerror(errno));
  lua_Integer count = 0;
  for (const struct dirent *entry; (entry = readdir(*folder)) != NULL;) {
    if (strcmp(entry->d_name, ".") == 0 || strcmp(entry->d_name, "..") == 0) continue;
    lua_pushstring(L, entry->d_name);
    lua_rawseti(L, 3, ++count);
  }
  closedir(*folder);
  *folder = NULL;
  return 1;
}

/* terminal_width(): COLUMNS where it is set, else the width of the terminal on standard output, else nil. */
static int terminal_width(lua_State *L) {
  const char *columns = getenv("COLUMNS");
  const long wanted = columns == NULL ? 0 : strtol(columns, NULL, 10);
  struct winsize size;
  if (wanted > 0 && wanted < 10000) lua_pushinteger(L, wanted);
  else if (isatty(STDOUT_FILENO) && ioctl(STDOUT_FILENO, TIOCGWINSZ, &size) == 0 && size.ws_col > 0) lua_pushinteger(L, size.ws_col);
  else lua_pushnil(L);
  return 1;
}

static const char *environment(const char *name) {
  const char *value = getenv(name);
  return value == NULL ? "" : value;
}

/* Whether the locale's name says UTF-8, by POSIX's order of its variables. Asked of the name, not of the C library: a library has no
   business to call setlocale, and a name that came over ssh is right about the terminal also where the locale isn't installed. */
static bool locale_is_utf8(void) {
  const char *name = *environment("LC_ALL") ? environment("LC_ALL") : *environment("LC_CTYPE") ? environment("LC_CTYPE") : environment("LANG");
  return strcasestr(name, "utf-8") != NULL || strcasestr(name, "utf8") != NULL;
}

/* terminal(): what standard output is: {rows = of a terminal, else nil, colour =, ascii = whether plain characters alone are safe}. A file
   or pipe gets no colour and the same characters wherever it is written. */
static int terminal(lua_State *L) {
  const bool there = isatty(STDOUT_FILENO), dumb = strcmp(environment("TERM"), "dumb") == 0 || *environment("TERM") == 0;
  struct winsize size = {0};
  if (there) ioctl(STDOUT_FILENO, TIOCGWINSZ, &size);
  lua_createtable(L, 0, 3);
  if (size.ws_row > 0) lua_pushinteger(L, size.ws_row), lua_setfield(L, -2, "rows");
  lua_pushboolean(L, there && !dumb && *environment("NO_COLOR") == 0), lua_setfield(L, -2, "colour");
  lua_pushboolean(L, there && (dumb || !locale_is_utf8())), lua_setfield(L, -2, "ascii");
  return 1;
}

void lac_open_output(lua_State *L) {
  static const luaL_Reg functions[] = {{"write_file", write_file}, {"make_folder", make_folder}, {"folder_entries", folder_entries}, {"terminal_width", terminal_width}, {"terminal", terminal}, {NULL, NULL}};
  luaL_setfuncs(L, functions, 0);
}
