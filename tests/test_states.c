/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Lua states in one process: they don't disturb each other, give back what they took, compute on in a forked child, and are
   interrupted by the host's own hook. */
#include <signal.h>
#include <stdlib.h>
#include <sys/time.h>
#include <sys/wait.h>
#include <time.h>
#include <unistd.h>

#include "lua_state.h"

/* Large enough for several threads. */
static const char ensemble[] = "return lac.case{distance = '156 ± 3 pc', rim_radius = '0.3 ± 0.05 au'}.rim_radius_angle:mean():value 'mas'";
static const char large[] = "lac.settings{draws = 3000000, threads = 4}"
                            "local c = lac.case{distance = '156 ± 3 pc', rim_radius = '0.3 ± 0.05 au'}"
                            "return c.rim_radius_angle:mean():value 'mas'";

static void two_states_do_not_disturb_each_other(void **unused) {
  (void)unused;
  char before[64], after[64], other[64], text[200];
  lua_State *a = new_state(), *b = new_state();
  run(a, ensemble, before, sizeof before);
  assert_string_equal(run(b, ensemble, other, sizeof other), before); /* the same seed */
  run(b, "lac.settings{seed = 7, draws = 500, threads = 1, memory = 3}", text, sizeof text);
  run(b, "lac.quantity{name = 'rim_colour', unit = '1', meaning = 'invented'}", text, sizeof text);
  run(b, "lac.relation{gives = 'rim_colour', by = 'two', from = {'rim_radius'}, function() return 2 end}", text, sizeof text);
  assert_string_equal(run(b, "return lac.rim_colour{rim_radius = '1 au'}:value()", text, sizeof text), "2.0");
  assert_string_not_equal(run(b, ensemble, other, sizeof other), before); /* another seed */
  assert_string_equal(run(a, ensemble, after, sizeof after), before);
  assert_string_equal(run(a, "local s = lac.settings() return s.seed .. ' ' .. s.draws .. ' ' .. s.memory", text, sizeof text),
                      "0 10000 2048.0");
  assert_non_null(strstr(run(a, "return select(2, pcall(lac.case, {rim_colour = 2}))", text, sizeof text), "unknown name 'rim_colour'"));
  lua_close(b);
  assert_string_equal(run(a, ensemble, after, sizeof after), before);
  lua_close(a);
}

static void users_rows_of_two_states_call_each_its_own(void **unused) {
  (void)unused;
  static const char define[] = "lac.quantity{name = 'shade', unit = '1', meaning = 'invented'}"
                               "lac.relation{gives = 'shade', from = {'rim_radius'}, function(r) return r / r * %d end}"
                               "c = lac.case{rim_radius = '1 ± 0.1 au'}";
  lua_State *L[2];
  char code[400], text[64];
  for (int i = 0; i < 2; i++) {
    L[i] = new_state();
    snprintf(code, sizeof code, define, i + 1);
    run(L[i], code, text, sizeof text);
  }
  assert_string_equal(run(L[0], "return c.shade:mean():value()", text, sizeof text), "1.0");
  assert_string_equal(run(L[1], "return c.shade:mean():value()", text, sizeof text), "2.0");
  lua_close(L[1]);
  lua_close(L[0]);
}

static void what_was_stored_is_given_back(void **unused) {
  (void)unused;
  static const char *const codes[] = {
      "local q = lac.quantity '156 ± 3 pc' * 2 q:value 'pc' return tostring(q)",
      "local c = lac.case{distance = '156 ± 3 pc', rim_radius = lac.sweep('0.1 au', '1 au', 7)} return tostring(c.rim_radius_angle)",
      "local c = lac.case{distance = '156 ± 3 pc', rim_radius = '0.3 ± 0.05 au', wavelength = '1.65 um', projected_baseline = '100 m'}"
      "return tostring(c.rim_resolved_by_array) .. tostring(c:why 'rim_resolved_by_array') .."
      "tostring(c:solve('projected_baseline', {rim_elements_by_array = 2})) .. tostring(c:check())",
      "lac.quantity{name = 'shade', unit = '1', meaning = 'invented'}"
      "lac.relation{gives = 'shade', from = {'rim_radius'}, function() error 'invented' end}"
      "return select(2, pcall(tostring, lac.case{rim_radius = '1 ± 0.1 au'}.shade))",
      "lac.settings{memory = 1} return select(2, pcall(lac.quantity '1 ± 0.1'.value, lac.quantity(1, '1') * lac.along('a', lac.quantity '1 "
      "± 0.1':value())))",
  };
  char text[4000];
  lua_State *L = new_state();
  for (size_t i = 0; i < sizeof codes / sizeof *codes; i++) {
    run(L, codes[i], text, sizeof text);
    lua_gc(L, LUA_GCCOLLECT, 0);
    lua_gc(L, LUA_GCCOLLECT, 0);
    assert_int_equal(lac_state_of(L)->work.used, 0);
  }
  lua_close(L);
}

static void many_states_after_parallel_work(void **unused) {
  (void)unused;
  char first[64], text[64];
  for (int i = 0; i < 10; i++) {
    lua_State *L = new_state();
    run(L, large, i == 0 ? first : text, sizeof text);
    if (i > 0) assert_string_equal(text, first);
    lua_close(L);
  }
}

/* A child that hangs in a parallel region would sit there for ever. */
static void a_forked_child_computes(void **unused) {
  (void)unused;
  char here[64], there[64];
  lua_State *L = new_state();
  run(L, large, here, sizeof here);
  for (int fresh = 0; fresh < 2; fresh++) {
    const pid_t child = fork();
    assert_true(child >= 0);
    if (child == 0) {
      lua_State *own = fresh ? new_state() : L;
      run(own, large, there, sizeof there);
      _exit(strcmp(here, there) == 0 ? 0 : 1);
    }
    int status = -1, waited = 0;
    while (waitpid(child, &status, WNOHANG) == 0 && waited++ < 1000) usleep(20000);
    if (waited > 1000) kill(child, SIGKILL), waitpid(child, &status, 0);
    assert_true(WIFEXITED(status));
    assert_int_equal(WEXITSTATUS(status), 0);
  }
  run(L, large, there, sizeof there);
  assert_string_equal(there, here);
  lua_close(L);
}

/* As a host does on Ctrl-C: a signal handler sets a hook on the thread it knows, and the hook raises. */
static lua_State *armed;
static void stop_hook(lua_State *L, lua_Debug *activation) {
  (void)activation;
  lua_sethook(L, NULL, 0, 0);
  luaL_error(L, "the host says stop");
}
static void on_alarm(int number) {
  (void)number;
  lua_sethook(armed, stop_hook, LUA_MASKCALL | LUA_MASKRET | LUA_MASKLINE | LUA_MASKCOUNT, 1);
}

static double seconds(void) {
  struct timespec now;
  clock_gettime(CLOCK_MONOTONIC, &now);
  return (double)now.tv_sec + 1e-9 * (double)now.tv_nsec;
}

static void the_hosts_hook_ends_a_computation(void **unused) {
  (void)unused;
  static const char *const codes[] = {
      "lac.settings{draws = 10000000000} return lac.mean(lac.sqrt(lac.quantity '1 ± 0.1'))",
      "lac.settings{draws = 10000000000} return lac.median(lac.quantity '1 ± 0.1')",
      "lac.settings{draws = 10000000000} return coroutine.wrap(function() return lac.mean(lac.quantity '1 ± 0.1') end)()",
      "lac.settings{draws = 10000} local c = lac.case{distance = '156 ± 3 pc', rim_radius = lac.sweep('0.1 au', '1 au', 100000)}"
      "return c:solve('distance', {rim_radius_angle = '2 mas'})",
  };
  signal(SIGALRM, on_alarm);
  for (size_t i = 0; i < sizeof codes / sizeof *codes; i++) {
    lua_State *L = armed = new_state();
    const struct itimerval soon = {.it_value = {.tv_usec = 200000}};
    setitimer(ITIMER_REAL, &soon, NULL);
    const double begun = seconds();
    const int status = luaL_dostring(L, codes[i]);
    const double took = seconds() - begun;
    assert_int_not_equal(status, LUA_OK);
    if (strstr(lua_tostring(L, -1), "the host says stop") == NULL) fail_msg("%s", lua_tostring(L, -1));
    if (!(took < 3)) fail_msg("%s: ended after %g s", codes[i], took);
    lua_close(L);
  }
}

/* A user's row may use coroutines of its own; the computation around it belongs to the thread it began on. */
static void a_users_row_with_a_coroutine(void **unused) {
  (void)unused;
  static const char code[] = "lac.settings{draws = 200000}"
                             "lac.quantity{name = 'shade', unit = '1', meaning = 'invented'}"
                             "lac.relation{gives = 'shade', from = {'rim_radius'}, function(r)"
                             "  local x = coroutine.wrap(function() return lac.mean(lac.quantity '2 ± 0.1') end)()"
                             "  collectgarbage()"
                             "  return r / r + 0 * x end}"
                             "return lac.case{rim_radius = '1 ± 0.1 au'}.shade:mean():value()";
  char text[64];
  lua_State *L = new_state();
  assert_string_equal(run(L, code, text, sizeof text), "1.0");
  lua_close(L);
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(two_states_do_not_disturb_each_other),
      cmocka_unit_test(users_rows_of_two_states_call_each_its_own),
      cmocka_unit_test(what_was_stored_is_given_back),
      cmocka_unit_test(many_states_after_parallel_work),
      cmocka_unit_test(a_forked_child_computes),
      cmocka_unit_test(the_hosts_hook_ends_a_computation),
      cmocka_unit_test(a_users_row_with_a_coroutine),
  };
  return cmocka_run_group_tests_name("states", tests, NULL, NULL);
}
