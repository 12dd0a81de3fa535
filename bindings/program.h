/* SPDX-License-Identifier: GPL-3.0-or-later */
/* What the files of the program share: running Lua code so that Ctrl-C ends it, and telling the user what came of it.
   The program, unlike the library, owns its process: signal handlers and the few statics behind them are here. */
#ifndef LACUNA_PROGRAM_H
#define LACUNA_PROGRAM_H

#include <lua.h>
#include <stdbool.h>

/* Makes Lua code of this state interruptible: its coroutines are tracked, its pcall lets an interruption through, and SIGINT is handled.
   Once, after the standard libraries are open. In a conversation every Ctrl-C is survived; a script is killed by the second. */
void program_catch_interrupts(lua_State *L, bool conversation);

/* Calls as lua_pcall does. SIGINT, in Lua code or in a computation of the core, ends the call; program_was_interrupted then says so.
   The error message, if it is a text, is the only thing on the stack after a failure; with LACUNA_TRACEBACK=1 a traceback follows it. */
int program_call(lua_State *L, int arguments, int results);
bool program_was_interrupted(void);
void program_forget_interruption(void);

/* Loads text as an expression ("return text") if it is one or the beginning of one, else as statements. As luaL_loadbuffer.
   The error message of what is only a beginning ends in <eof>: program_is_beginning. */
int program_load(lua_State *L, const char *text, const char *chunk_name);
bool program_is_beginning(lua_State *L); /* of the message on the top of the stack */

/* Prints the values from the stack's index `from` to its top as the prompt shows them, and takes them off. As program_call. */
int program_show(lua_State *L, int from);

/* Prints the error on the top of the stack, in one line if it is one, and takes it off. Prefix: "lacuna: ", or "" at the prompt. */
void program_report(lua_State *L, const char *prefix);

/* Adds to the table on top of the stack what runs a study in several processes and tells how far it is. */
void program_open_workers(lua_State *L);

/* The conversation at a terminal, until Ctrl-D. */
void program_repl(lua_State *L);

#endif
