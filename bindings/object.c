/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Objects in Lua: dust, bands. Each type has its own metatable, made by the file that makes the objects; what all have in common is here. */
#include <string.h>

#include "binding.h"

#define OBJECT_TAG UINT64_C(0x4c61634f626a6563)

lac_object *lac_to_object(lua_State *L, int index) {
  if (lua_type(L, index) != LUA_TUSERDATA || lua_rawlen(L, index) != sizeof(lac_object)) return NULL;
  lac_object *object = lua_touserdata(L, index);
  return object->tag == OBJECT_TAG ? object : NULL;
}

const void *lac_check_object(lua_State *L, int index, const char *type, const char *what) {
  const lac_object *object = lac_to_object(L, index);
  if (object == NULL || strcmp(object->type, type) != 0) lac_error(L, "%s wants %s; got %s", what, type, luaL_tolstring(L, index, NULL));
  return lac_value_object_pointer(object->value);
}

static int object_finalise(lua_State *L) {
  lac_object *object = lac_to_object(L, 1);
  if (object == NULL) return 0;
  object->tag = 0;
  lac_value_drop(object->value);
  object->value = NULL;
  return 0;
}

lac_object *lac_push_object(lua_State *L, const char *type, const void *metatable) {
  lac_object *object = lua_newuserdatauv(L, sizeof *object, 0);
  *object = (lac_object){.tag = OBJECT_TAG, .type = type};
  lua_rawgetp(L, LUA_REGISTRYINDEX, metatable);
  lua_pushcfunction(L, object_finalise);
  lua_setfield(L, -2, "__gc");
  lua_setmetatable(L, -2);
  return object;
}

void lac_object_take(lua_State *L, lac_object *object, const void *pointer, void (*drop)(const void *)) {
  if (lac_value_object(pointer, drop, &object->value) != LAC_OK) lac_error(L, "%s", lac_status_words(LAC_NO_MEMORY));
}

/* object_type(anything): the type of an object, nothing for what is none. */
static int object_type(lua_State *L) {
  const lac_object *object = lac_to_object(L, 1);
  if (object == NULL) return 0;
  lua_pushstring(L, object->type);
  return 1;
}

void lac_open_object(lua_State *L) {
  lua_pushcfunction(L, object_type);
  lua_setfield(L, -2, "object_type");
}
