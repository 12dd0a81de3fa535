/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Lua's memory runs out at the first allocation, at the second, and so on until all goes well: each failure before must be Lua's own
   error, and leave nothing behind. */
#include <stdlib.h>

#include "lua_state.h"

/* How many allocations are still granted; negative: all. Giving back and shrinking never fail. */
typedef struct {
  long granted;
} budget;

static void *allocate(void *context, void *block, size_t old_size, size_t size) {
  budget *b = context;
  if (size == 0) {
    free(block);
    return NULL;
  }
  if (block == NULL || size > old_size) {
    if (b->granted == 0) return NULL;
    if (b->granted > 0) b->granted--;
  }
  return realloc(block, size);
}

/* Small steps at first, larger ones later: every kind of allocation is met, in a time that can be waited for. */
static long next_limit(long limit) { return limit + 1 + limit / 40; }

static int open_protected(lua_State *L) {
  luaL_openlibs(L);
  luaL_requiref(L, "lacuna", luaopen_lacuna, 0);
  return 0;
}

static void opening_fails_cleanly(void **unused) {
  (void)unused;
  int status = LUA_ERRMEM, failures = 0;
  for (long limit = 60; status != LUA_OK; limit = next_limit(limit)) {
    budget b = {.granted = -1};
    lua_State *L = lua_newstate(allocate, &b);
    assert_non_null(L);
    lua_pushcfunction(L, open_protected);
    b.granted = limit;
    status = lua_pcall(L, 0, 0, 0);
    b.granted = -1;
    if (status != LUA_OK && status != LUA_ERRMEM) fail_msg("with %ld allocations: %s", limit, lua_tostring(L, -1));
    failures += status != LUA_OK;
    lua_close(L);
    assert_true(limit < 1000000);
  }
  assert_true(failures > 50);
}

static void computing_fails_cleanly(void **unused) {
  (void)unused;
  static const char *const codes[] = {
      "return lac.quantity '156 ± 3 pc' * 2 + lac.quantity(3, 'pc')",
      "return tostring(lac.quantity '156 +3 -2 pc' * lac.sweep{1, 2, 3})",
      "return lac.spread.samples{1, 2, 3}:mean(), lac.spread.lopsided('3 au', '1 au', '2 au'):median(), lac.along('a', {1, 2}):value()",
      "return lac.case{distance = '156 ± 3 pc', rim_radius = '0.3 au'}.rim_radius_angle:interval(0.9)",
      "return tostring(lac.case{distance = '156 ± 3 pc', rim_radius = lac.sweep.log('0.1 au', '1 au', 5)})",
      "local c = lac.case{distance = '156 ± 3 pc', rim_radius = '0.3 ± 0.05 au', wavelength = '1.65 um', projected_baseline = '100 m'}"
      "return tostring(c.rim_resolved_by_array) .. tostring(c:why 'rim_resolved_by_array') .. tostring(c:check()) .. tostring(c:missing "
      "'gap_width')",
      "local c = lac.case{distance = '156 ± 3 pc', rim_radius = lac.sweep('0.3 au', '0.5 au', 3), wavelength = '1.65 um', "
      "projected_baseline = '100 m'}"
      "return c:solve('projected_baseline', {rim_elements_by_array = 2})",
      "return c:with{rim_radius = '3 ± 0.1 au'}:using{array_resolution = 'fringe'}.shade:at{draw = 3}:value()",
      "return tostring(lac.help 'gap_width')",
      "return tostring(lac.compare(c, {far = {distance = '300 pc'}, fringe = {using = {array_resolution = 'fringe'}}}, "
      "{'rim_elements_by_array', 'rim_resolved_by_array'}))",
      "return tostring(c:sensitivity 'rim_size_angle'), tostring(c:sensitivity 'rim_resolved_by_array')",
      "local s = lac.study{targets = {{name = 'one', distance = '156 ± 3 pc'}, {name = 'two', distance = '90 pc'}}, given = {rim_radius = '0.3 au'}, "
      "ask = {'rim_radius_angle'}}"
      "return s:table(), tostring(s)",
      "local f = lac.figure{of = c, show = 'rim_elements_by_array', along = {projected_baseline = lac.sweep('20 m', '200 m', 5)}}"
      "return f:csv(), f:caption(), f:alternative(), f:script(), f:text()",
      "complete.find('case{distance = \"156 p', 20) complete.find('c:solve(\"proj', 14)"
      "local _, candidates = complete.find('c.', 2)"
      "return complete.listing(candidates, 1, 80, 24)",
      "local f = session.compile('local a, b <const> = 1, 2; c2 = a + b', '=prompt')"
      "f()"
      "session.ran('local a, b <const> = 1, 2; c2 = a + b', true, 0)",
      "core.fits_table({extname = 'T', date = '2000-01-01', 'a comment'}, {{name = 'x', unit = 'pc', description = 'invented', 1.5, 2}, "
      "{name = 'n', texts = true, 'one', 'two'}}, 2)",
      "core.run_program({'sh', '-c', 'cat; echo problem >&2'}, 'text', {'PATH=/bin:/usr/bin'}) core.run_program({'/there is no such program'}, '', {})",
      "core.folder_entries('/') core.write_file('/dev/null', 'text') core.read_csv('list', nil, 'name,distance\\na,\"1\"\\n')",
      "local q = lac.quantity '1 ± 0.1 au' local held = core.unbound_hold(q) q:mean() core.unbound_restore(q, held)",
  };
  budget b = {.granted = -1};
  lua_State *L = lua_newstate(allocate, &b);
  assert_non_null(L);
  open_module(L);
  char text[100];
  lac_push_part(L, "lacuna.complete"), lua_setglobal(L, "complete");
  lac_push_part(L, "lacuna.session"), lua_setglobal(L, "session");
  run(L,
      "print = function() end "
      "for i = 1, 20 do local name, value = debug.getupvalue(lac.quantity, i) if name == 'core' then core = value end end "
      "lac.settings{draws = 300}"
      "lac.quantity{name = 'shade', unit = '1', meaning = 'invented'}"
      "lac.relation{gives = 'shade', from = {'rim_radius'}, function(r) return r / r end}"
      "c = lac.case{distance = '156 pc', rim_radius = '0.3 ± 0.05 au', wavelength = '1.65 um', projected_baseline = '100 m'}",
      text, sizeof text);
  for (size_t i = 0; i < sizeof codes / sizeof *codes; i++) {
    assert_int_equal(luaL_loadstring(L, codes[i]), LUA_OK);
    int status = LUA_ERRMEM;
    for (long limit = 0; status != LUA_OK; limit = next_limit(limit)) {
      lua_pushvalue(L, 1);
      b.granted = limit;
      status = lua_pcall(L, 0, 0, 0);
      b.granted = -1;
      if (status != LUA_OK && status != LUA_ERRMEM) fail_msg("%s\nwith %ld allocations: %s", codes[i], limit, lua_tostring(L, -1));
      lua_settop(L, 1);
      assert_true(limit < 1000000);
    }
    lua_settop(L, 0);
    lua_gc(L, LUA_GCCOLLECT, 0);
    lua_gc(L, LUA_GCCOLLECT, 0);
  }
  run(L, "c, c2 = nil", text, sizeof text);
  lua_gc(L, LUA_GCCOLLECT, 0);
  lua_gc(L, LUA_GCCOLLECT, 0);
  assert_int_equal(lac_state_of(L)->work.used, 0);
  lua_close(L);
}

/* The glossary has grown, and the case's chain can't be settled anew: what has the old chain is not asked with the new names. */
static void settling_fails_cleanly(void **unused) {
  (void)unused;
  budget b = {.granted = -1};
  lua_State *L = lua_newstate(allocate, &b);
  assert_non_null(L);
  open_module(L);
  char text[200];
  run(L, "c = lac.case{distance = '156 pc', rim_radius = '0.3 au'}", text, sizeof text);
  assert_int_equal(luaL_loadstring(L, "return c.rim_radius_angle"), LUA_OK);
  int status = LUA_ERRMEM;
  for (long limit = 0; status != LUA_OK; limit++) {
    snprintf(text, sizeof text, "lac.quantity{name = 'later_%ld', unit = 'pc', meaning = 'invented'}", limit);
    assert_int_equal(luaL_dostring(L, text), LUA_OK);
    lua_pushvalue(L, 1);
    b.granted = limit;
    status = lua_pcall(L, 0, 0, 0);
    b.granted = -1;
    lua_settop(L, 1);
    snprintf(text, sizeof text, "return c.later_%ld", limit);
    assert_int_not_equal(luaL_dostring(L, text), LUA_OK);
    assert_non_null(strstr(lua_tostring(L, -1), "later_"));
    lua_settop(L, 1);
    assert_true(limit < 1000);
  }
  lua_close(L);
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(opening_fails_cleanly),
      cmocka_unit_test(computing_fails_cleanly),
      cmocka_unit_test(settling_fails_cleanly),
  };
  return cmocka_run_group_tests_name("Lua's memory", tests, NULL, NULL);
}
