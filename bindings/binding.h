/* SPDX-License-Identifier: GPL-3.0-or-later */
/* What the files of the Lua binding share: one lac_state for each Lua state (never a global), the quantity userdata, and error plumbing.
   Nothing that malloc gave is live across a call that can raise: userdata first, resource second. */
#ifndef LACUNA_BINDING_H
#define LACUNA_BINDING_H

#include <lauxlib.h>
#include <lua.h>
#include <stdbool.h>
#include <stdint.h>

#include "lacuna/catalogue.h"
#include "lacuna/plan.h"
#include "lacuna/quantity.h"
#include "lacuna/units.h"

/* All that a Lua state's calculations share. Lives in the registry. */
typedef struct {
  lac_work work;
  lac_catalogue *catalogue; /* made at first use, see lac_catalogue_of */
  uint64_t seed;
  size_t draws;
  uint64_t unbound_made;    /* spreads and sweeps made so far: the next one's number names it where no given does */
  int calls;                /* of users' rows that are being computed, one within the other */
  lac_axis *draw;           /* the axis draw, of draws elements; made at first use */
  lua_State *caller, *main; /* the thread whose C call runs now, and the host's main one, for poll */
  lua_Hook hook, main_hook; /* their hooks when the call began */
} lac_state;

lac_state *lac_state_of(lua_State *L);         /* of this Lua state; made (and anchored) at first use */
lac_catalogue *lac_catalogue_of(lua_State *L); /* raises if the tables have a defect */

/* Raises an error with the position of the nearest caller that is not one of the binding's own sources. Never returns. */
int lac_error(lua_State *L, const char *format, ...);
/* Pushes what stands at index as an error message shows it, and returns it: "5 au", "\"5 au\"", "a table", "nothing". */
const char *lac_shown(lua_State *L, int index);
/* Writes a dimension with its article, "a length", and returns buffer. */
const char *lac_a_dimension(lac_dimension dimension, char *buffer, size_t size);

/* Raises where the host has set a locale with another decimal point: what is written for other programs would not be read as it is meant. */
void lac_check_decimal_point(lua_State *L, const char *what);

/* Bracket a call that may run long: lac_state_begin before, lac_state_end after; the latter raises where the status is
   LAC_INTERRUPTED (through the host's hook where one was set), LAC_OVER_CAP, LAC_NO_MEMORY, LAC_CALLBACK_FAILED ... */
lac_state *lac_state_begin(lua_State *L);
void lac_state_end(lua_State *L, lac_status status);
/* Raises where so many elements would pass the memory cap; dead results are collected first. For memory that the cap doesn't count. */
void lac_check_room(lua_State *L, size_t elements);

/* Keeps the error on top of the stack (popped), which a user's function left under a C computation; lac_state_end rethrows it. */
void lac_state_keep_error(lua_State *L);

/* A spread or a sweep that has not been used yet: the first given that takes it, or the first use, names it. */
typedef struct {
  bool sweep;           /* or a spread */
  lac_spread spread;    /* of a spread */
  size_t count;         /* of a sweep: its elements */
  uint64_t ordinal;
  int further;          /* holders besides the first one: see lac_unbound_drop */
  double elements[];    /* the sweep's, or the spread's samples; SI */
} lac_unbound;

void lac_unbound_drop(lac_unbound *unbound); /* the last holder's frees it; NULL is let pass */

/* The userdata behind each object in Lua: dust, a band. Immutable; cases hold on to the value. */
typedef struct {
  uint64_t tag;
  lac_value *value; /* of the kind object */
  const char *type; /* the glossary's name of the kind: "dust" */
} lac_object;

/* A new object on the stack, still empty, with the metatable in the registry at the key `metatable`; and what it holds, taken over: dropped
   at once where that fails, which raises. Push first, make the resource second. */
lac_object *lac_push_object(lua_State *L, const char *type, const void *metatable);
void lac_object_take(lua_State *L, lac_object *object, const void *pointer, void (*drop)(const void *));
lac_object *lac_to_object(lua_State *L, int index); /* NULL if it is none */
const void *lac_check_object(lua_State *L, int index, const char *type, const char *what);
void lac_open_object(lua_State *L);
void lac_open_band(lua_State *L);
void lac_open_dust(lua_State *L);

/* The userdata behind each quantity in Lua. One number: value and unbound are NULL. */
typedef struct {
  uint64_t tag;
  lac_dimension dimension;
  double number;        /* SI */
  lac_value *value;     /* with axes; one reference is held */
  lac_unbound *unbound;
  const char *unit;     /* display unit: of the catalogue, or anchored by lac_unit_anchor; may be NULL */
  int name;             /* glossary id, or -1 */
} lac_quantity;

lac_quantity *lac_to_quantity(lua_State *L, int index); /* NULL if it is none */
/* A new quantity on the stack: one number; or empty, with room for a value (which has a finaliser). */
lac_quantity *lac_push_number(lua_State *L, double number, lac_dimension dimension, const char *unit, int name);
lac_quantity *lac_push_empty(lua_State *L, lac_dimension dimension, const char *unit, int name);
/* The quantity at index, made from a number or a string there if need be (and put in its place). Raises naming `what`. */
lac_quantity *lac_check_quantity(lua_State *L, int index, const char *what);
/* The same, with a spread or sweep bound by the order of its making where it was unbound. */
lac_quantity *lac_check_bound(lua_State *L, int index, const char *what);
/* Binds a spread or sweep to a name (NULL: by its ordinal) and a target (NULL: none). */
void lac_bind(lua_State *L, lac_quantity *quantity, const char *name, const char *target);
/* The value of a bound quantity as a node to be given back with lac_value_drop; raises on lack of memory only when nothing is held. */
lac_status lac_value_of(const lac_quantity *quantity, lac_value **value);
/* A quantity's unit string anchored for the life of the state. */
const char *lac_unit_anchor(lua_State *L, const char *unit);
/* A block function applied to the quantities at the given stack places, storing deep arguments where needed; the result is pushed. */
void lac_push_computed(lua_State *L, lac_block_function *block, int count, const int *places, lac_dimension dimension, const char *unit);
/* Stores a quantity's elements, so that lac_value_data is there. */
void lac_store(lua_State *L, lac_quantity *quantity);

/* Openers of the binding's parts: each adds its functions to the table on top of the stack. */
void lac_open_quantity(lua_State *L);
void lac_open_elements(lua_State *L);
void lac_open_spread(lua_State *L);
void lac_open_summary(lua_State *L);
void lac_open_catalogue(lua_State *L);
void lac_open_case(lua_State *L);
void lac_open_solve(lua_State *L);
void lac_open_sensitivity(lua_State *L);
void lac_open_state(lua_State *L);
void lac_open_csv(lua_State *L);
void lac_open_output(lua_State *L);
void lac_open_run_program(lua_State *L);
void lac_open_digest(lua_State *L);
void lac_open_fits(lua_State *L);

/* A user's row: its function in Lua, called by the plan in pieces. */
typedef struct {
  lac_state *state;
  int function; /* reference in the registry */
  int row;      /* row number in the catalogue, once added */
} lac_users_row;
lac_user_function lac_call_users_row;

/* The sources of the binding that are written in Lua, as bytecode made at build time. */
typedef struct {
  const char *name; /* module name: "lacuna.case" */
  const unsigned char *code;
  size_t size;
} lac_embedded;
extern const lac_embedded lac_embedded_modules[]; /* ends with name NULL; generated */

/* Pushes what the embedded source "lacuna.case" returns (run once for each Lua state); raises as Lua does. */
void lac_push_part(lua_State *L, const char *name);

__attribute__((visibility("default"))) int luaopen_lacuna(lua_State *L);

#endif
