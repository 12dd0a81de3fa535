/* SPDX-License-Identifier: GPL-3.0-or-later */
/* A walk over the glossary and the relations: every name and row is whole, and users' ones join them. */
#include "check.h"

#include <ctype.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

#include "walk.h"

static bool is_text(const char *text) { return text && *text; }

static void no_mark(const char *text, const char *where) {
  static const char *const marks[] = {"<at>",        "<radius>", "<where>",  "<sub>",    "<_sub>",
                                      "<structure>", "<size>",   "<length>", "<symbol>", "<meaning>"};
  for (size_t i = 0; text && i < sizeof marks / sizeof marks[0]; i++) expect(!strstr(text, marks[i]), where, NULL, "a mark is left");
}

/* Braces are in pairs, and every \left has its \right: what every reader of the TeX subset needs. */
static bool is_balanced(const char *tex) {
  int depth = 0, pairs = 0;
  for (const char *p = tex; *p; p++) {
    depth += (*p == '{') - (*p == '}');
    pairs +=
        (strncmp(p, "\\left", 5) == 0 && !isalpha((unsigned char)p[5])) - (strncmp(p, "\\right", 6) == 0 && !isalpha((unsigned char)p[6]));
    if (depth < 0 || pairs < 0) return false;
  }
  return depth == 0 && pairs == 0;
}

static void names_are_whole(void **state) {
  (void)state;
  static const char *const subjects[] = {"star", "photometry", "radiation", "disc", "dust", "rim", "orbit", "gap", "instrument",
                                         "structure", "visibility", "emission"};
  for (int id = 0; id < lac_catalogue_names(catalogue); id++) {
    const lac_name *name = lac_catalogue_name(catalogue, id);
    const lac_unit unit = lac_catalogue_unit(catalogue, id);
    const lac_range range = lac_catalogue_range(catalogue, id);
    expect(lac_catalogue_find(catalogue, name->name) == id, name->name, NULL, "is not found");
    expect(isfinite(unit.factor) && unit.factor > 0 && unit.dimension.denominator > 0, name->name, NULL, "has no unit");
    expect(range.low < range.high, name->name, NULL, "has an empty range");
    expect(is_text(name->symbol) && is_balanced(name->symbol), name->name, NULL, "has no symbol");
    expect(is_text(name->meaning) && !strchr(name->meaning, '\n'), name->name, NULL, "has no meaning");
    bool known = false;
    for (size_t i = 0; i < sizeof subjects / sizeof subjects[0]; i++)
      known |= is_text(name->subject) && strcmp(subjects[i], name->subject) == 0;
    expect(known, name->name, NULL, "has no subject");
    expect(name->presence == LAC_ONCE, name->name, NULL, "is a template");
    expect((name->kind == LAC_VERDICT) <= (range.low == 0 && range.high == 1), name->name, NULL, "is a verdict with another range");
    no_mark(name->name, name->name), no_mark(name->symbol, name->name), no_mark(name->meaning, name->name),
        no_mark(name->range, name->name);
  }
  end_walk();
}

/* A synonym means one name, and is no name itself. */
static void synonyms_mean_one_name(void **state) {
  (void)state;
  for (int id = 0; id < lac_catalogue_names(catalogue); id++) {
    const lac_name *name = lac_catalogue_name(catalogue, id);
    char words[200] = "";
    snprintf(words, sizeof words, "%s", name->synonyms ? name->synonyms : "");
    for (char *rest = words, *word; (word = strtok_r(rest, " ", &rest));) {
      expect(lac_catalogue_find(catalogue, word) < 0, name->name, word, "a synonym is a name");
      expect(lac_catalogue_find_synonym(catalogue, word) == id, name->name, word, "a synonym is another name's too");
    }
  }
  assert_int_equal(lac_catalogue_find_synonym(catalogue, "distance"), lac_catalogue_find(catalogue, "distance"));
  assert_int_equal(lac_catalogue_find(catalogue, "R_H"), -1);
  assert_int_equal(lac_catalogue_find_synonym(catalogue, "R_H"), lac_catalogue_find(catalogue, "hill_radius"));
  assert_int_equal(lac_catalogue_find(catalogue, ""), -1);
  end_walk();
}

static bool mentions(const char *equation, const char *name) {
  char bracketed[200];
  snprintf(bracketed, sizeof bracketed, "[%s]", name);
  return equation && strstr(equation, bracketed);
}

/* Every [name] of a text is a name. A bracket after \left is a delimiter. */
static bool knows_its_names(const char *text) {
  for (const char *open = text; open && (open = strchr(open, '[')); open++) {
    char name[200];
    if (open - text >= 5 && strncmp(open - 5, "\\left", 5) == 0) continue;
    snprintf(name, sizeof name, "%.*s", (int)strcspn(open + 1, "]"), open + 1);
    if (lac_catalogue_find(catalogue, name) < 0) return false;
  }
  return true;
}

static void check_row_texts(int row) {
  const lac_relation *r = lac_catalogue_row(catalogue, row);
  const bool assumed = r->kind == LAC_ASSUMED;
  expect_row(is_text(r->by) && strspn(r->by, "abcdefghijklmnopqrstuvwxyz0123456789_") == strlen(r->by), row, "has a by that is no word");
  expect_row(r->source && lac_source_find(r->source), row, "has no known source");
  expect_row(assumed || is_text(r->equation), row, "has no equation");
  expect_row(!r->equation || is_balanced(r->equation), row, "has an equation with braces or \\left, \\right not in pairs");
  expect_row(knows_its_names(r->equation), row, "has an unknown name in its equation");
  if (r->equation) expect_row(mentions(r->equation, r->gives), row, "has an equation without what it gives");
  for (int i = 0; i < LAC_MAX_ARGUMENTS && r->from[i]; i++)
    expect_row(mentions(r->equation, r->from[i]), row, r->from[i]), no_mark(r->from[i], r->gives);
  for (int i = 0; i < LAC_MAX_CONDITIONS && r->conditions[i]; i++) expect_row(knows_its_names(r->conditions[i]), row, r->conditions[i]);
  no_mark(r->gives, r->gives), no_mark(r->equation, r->gives), no_mark(r->supposes, r->gives), no_mark(r->unchecked, r->gives);
  no_mark(r->inverse_of, r->gives);
}

static void check_row_inputs(int row) {
  const lac_relation *r = lac_catalogue_row(catalogue, row);
  int count;
  const int *from = lac_catalogue_from(catalogue, row, &count);
  for (int i = 0; i < count; i++) {
    expect_row(strcmp(lac_catalogue_name(catalogue, from[i])->name, r->from[i]) == 0, row, "has an input with a wrong id");
    expect_row(from[i] != lac_catalogue_gives(catalogue, row), row, "takes what it gives");
    expect_row(lac_catalogue_name(catalogue, from[i])->kind != LAC_OBJECT || (i == 0 && r->of_object), row, "takes an object that is not its first input");
    for (int k = 0; k < i; k++) expect_row(from[k] != from[i], row, "takes an input twice");
  }
  for (int i = 0; i < LAC_MAX_BOUNDS && r->holds[i].name; i++) {
    bool is_input = false;
    for (int k = 0; k < count; k++) is_input |= strcmp(r->holds[i].name, r->from[k]) == 0;
    expect_row(is_input, row, "has a bound for what is no input");
    expect_row(r->holds[i].low < r->holds[i].high, row, "has an empty bound");
  }
}

static void check_row_kind(int row) {
  const lac_relation *r = lac_catalogue_row(catalogue, row);
  const int id = lac_catalogue_gives(catalogue, row);
  const bool verdict = lac_catalogue_name(catalogue, id)->kind == LAC_VERDICT;
  expect_row(r->presence == LAC_ONCE, row, "is a template");
  expect_row(lac_catalogue_name(catalogue, id)->kind != LAC_OBJECT, row, "gives an object");
  expect_row(r->kind != LAC_ASSUMED || strcmp(r->by, r->source) == 0, row, "is assumed and not called by its source");
  expect_row((r->kind == LAC_ASSUMED) == is_text(r->assumes), row, "is assumed without a value, or has a value and isn't");
  expect_row((r->conditions[0] != NULL) == verdict, row, "has conditions but is no verdict, or is a verdict without");
  expect_row(lac_catalogue_find_row(catalogue, id, r->by) == row, row, "is not found by its key");
  if (r->kind == LAC_ASSUMED) {
    expect_row(!r->function && !r->block && !r->from[0], row, "is assumed and has a function or inputs");
    expect_row(lac_range_holds(lac_catalogue_range(catalogue, id), lac_catalogue_assumed(catalogue, row)), row,
               "assumes a value out of range");
    expect_row(lac_relation_value(r, NULL) == lac_catalogue_assumed(catalogue, row), row, "has two assumed values");
  } else {
    const bool of_numbers = r->function && r->block && is_text(r->function_name);
    expect_row(of_numbers != (r->of_object != NULL) && r->from[0], row, "has no function, block form or inputs, or takes an object as well");
    expect_row(isnan(lac_catalogue_assumed(catalogue, row)), row, "assumes something");
  }
}

static void check_row_inverse(int row) {
  const lac_relation *r = lac_catalogue_row(catalogue, row);
  if (!r->inverse_of) return;
  char gives[200];
  const size_t length = strcspn(r->inverse_of, "/");
  snprintf(gives, sizeof gives, "%.*s", (int)length, r->inverse_of);
  const int id = lac_catalogue_find(catalogue, gives);
  const int inverted = id >= 0 && r->inverse_of[length] ? lac_catalogue_find_row(catalogue, id, r->inverse_of + length + 1) : -1;
  expect_row(inverted >= 0, row, "inverts a row that there is not");
  if (inverted < 0) return;
  bool takes = false;
  for (int i = 0; i < LAC_MAX_ARGUMENTS; i++) {
    const char *from = lac_catalogue_row(catalogue, inverted)->from[i];
    if (!from) break;
    takes |= strcmp(from, r->gives) == 0;
  }
  expect_row(takes && !lac_catalogue_row(catalogue, inverted)->inverse_of, row,
             "inverts a row that doesn't take what it gives, or an inverse one");
}

static void rows_are_whole(void **state) {
  (void)state;
  for (int row = 0; row < lac_catalogue_rows(catalogue); row++) {
    check_row_texts(row);
    check_row_inputs(row);
    check_row_kind(row);
    check_row_inverse(row);
  }
  end_walk();
}

/* Definitions, recipes, the user's, assumed; within a kind as in the tables, where later rows have higher numbers. */
static void rows_stand_in_order(void **state) {
  (void)state;
  int seen = 0;
  for (int id = 0; id < lac_catalogue_names(catalogue); id++) {
    int count;
    const int *rows = lac_catalogue_rows_of(catalogue, id, &count);
    seen += count;
    for (int i = 0; i < count; i++) expect_row(lac_catalogue_gives(catalogue, rows[i]) == id, rows[i], "stands under another name");
    for (int i = 1; i < count; i++) {
      const lac_relation *a = lac_catalogue_row(catalogue, rows[i - 1]), *b = lac_catalogue_row(catalogue, rows[i]);
      expect_row(a->kind < b->kind || (a->kind == b->kind && rows[i - 1] < rows[i]), rows[i], "is out of order");
    }
  }
  assert_int_equal(seen, lac_catalogue_rows(catalogue));
  end_walk();
}

/* 0 not seen, 1 on the path, 2 done. Returned: whether a circle was met. */
static bool meets_circle(int id, char *mark) {
  mark[id] = 1;
  int count, inputs;
  const int *rows = lac_catalogue_rows_of(catalogue, id, &count);
  for (int i = 0; i < count; i++) {
    if (lac_catalogue_row(catalogue, rows[i])->inverse_of) continue;
    const int *from = lac_catalogue_from(catalogue, rows[i], &inputs);
    for (int k = 0; k < inputs; k++) {
      if (mark[from[k]] == 2 || (mark[from[k]] == 0 && !meets_circle(from[k], mark))) continue;
      expect_row(false, rows[i], "is part of a circle");
      return true;
    }
  }
  mark[id] = 2;
  return false;
}

static void forward_rows_form_no_circle(void **state) {
  (void)state;
  char *mark = calloc((size_t)lac_catalogue_names(catalogue), 1);
  assert_non_null(mark);
  for (int id = 0; id < lac_catalogue_names(catalogue); id++)
    if (mark[id] == 0 && meets_circle(id, mark)) break;
  free(mark);
  end_walk();
}

static const lac_name *named(const char *name) {
  const int id = lac_catalogue_find(catalogue, name);
  assert_true(id >= 0);
  return lac_catalogue_name(catalogue, id);
}

static void templates_are_expanded(void **state) {
  (void)state;
  const int plain = lac_catalogue_find(catalogue, "aspect_ratio");
  assert_true(plain >= 0);
  assert_string_equal(lac_catalogue_name(catalogue, plain + 1)->name, "planet_aspect_ratio");
  assert_string_equal(lac_catalogue_name(catalogue, plain + 2)->name, "ring_aspect_ratio");
  assert_string_equal(named("aspect_ratio")->symbol, "h");
  assert_string_equal(named("planet_aspect_ratio")->symbol, "h_p");
  assert_string_equal(named("ring_sound_speed")->symbol, "c_{s,ring}");
  assert_string_equal(named("planet_aspect_ratio")->meaning, "scale height over radius at the planet");
  assert_non_null(named("aspect_ratio")->synonyms);
  assert_null(named("planet_aspect_ratio")->synonyms);
  assert_string_equal(named("cavity_elements_by_mirror")->meaning, "resolution elements of the mirror across the cavity (its diameter)");
  assert_int_equal(named("gap_resolved_by_array")->kind, LAC_VERDICT);
  const lac_relation *planet =
      lac_catalogue_row(catalogue, lac_catalogue_find_row(catalogue, lac_catalogue_find(catalogue, "planet_aspect_ratio"), "definition"));
  assert_string_equal(planet->gives, "planet_aspect_ratio");
  assert_true(mentions(planet->equation, "planet_scale_height"));
}

static void lengths_have_angles(void **state) {
  (void)state;
  int lengths = 0;
  for (int id = 0; id < lac_catalogue_names(catalogue); id++) {
    const lac_name *name = lac_catalogue_name(catalogue, id);
    if (!name->on_sky) continue;
    lengths++;
    char angle[200], row[220];
    snprintf(angle, sizeof angle, "%s_angle", name->name);
    snprintf(row, sizeof row, "%s/definition", angle);
    const int angle_id = lac_catalogue_find(catalogue, angle);
    expect(angle_id == id + 1, name->name, NULL, "has no angle after it");
    if (angle_id < 0) continue;
    int count;
    const int *rows = lac_catalogue_rows_of(catalogue, angle_id, &count);
    expect(count >= 1, angle, NULL, "has no row");
    rows = lac_catalogue_rows_of(catalogue, id, &count);
    bool both_ways = false;
    for (int i = 0; i < count; i++) {
      const char *inverse_of = lac_catalogue_row(catalogue, rows[i])->inverse_of;
      both_ways |= inverse_of && strcmp(inverse_of, row) == 0;
    }
    expect(both_ways, name->name, NULL, "has no row from its angle");
  }
  assert_true(lengths > 10);
  assert_string_equal(named("hill_radius_angle")->symbol, "\\theta\\left(R_H\\right)");
  assert_string_equal(named("hill_radius_angle")->subject, "orbit");
  end_walk();
}

/* Whether the name is among the first few offered for a word. */
static bool offered(const char *word, const char *name) {
  int ids[3];
  const int count = lac_catalogue_nearest(catalogue, word, ids, 3);
  for (int i = 0; i < count; i++)
    if (strcmp(lac_catalogue_name(catalogue, ids[i])->name, name) == 0) return true;
  return false;
}

static void nearest_names_are_offered(void **state) {
  (void)state;
  int ids[5];
  assert_true(offered("gap_widht", "gap_width")); /* neighbours swapped */
  assert_true(offered("wavelenght", "wavelength"));
  assert_true(offered("hillradius", "hill_radius"));     /* a letter left out */
  assert_true(offered("Stellar_Mass", "stellar_mass"));  /* other case */
  assert_true(offered("mass_stellar", "stellar_mass"));  /* words in another order */
  assert_true(offered("rim_size", "rim_size_angle"));    /* a word left out */
  assert_true(offered("baselin", "projected_baseline")); /* near a synonym */
  assert_int_equal(lac_catalogue_nearest(catalogue, "qwertyuiop", ids, 5), 0);
  assert_int_equal(lac_catalogue_nearest(catalogue, "", ids, 5), 0);
  assert_int_equal(lac_catalogue_nearest(catalogue, "radius", ids, 0), 0);
  assert_true(lac_catalogue_nearest(catalogue, "radius", ids, 5) == 5);
  assert_string_equal(lac_catalogue_name(catalogue, ids[0])->name, "radius"); /* equal is nearest */
  char longest[3000];
  memset(longest, 'a', sizeof longest - 1);
  longest[sizeof longest - 1] = '\0';
  assert_int_equal(lac_catalogue_nearest(catalogue, longest, ids, 5), 0);
}

static const lac_name invented = {.name = "knot_radius",
                                  .synonyms = "knot",
                                  .unit = "au",
                                  .range = "> 0",
                                  .symbol = "r_k",
                                  .meaning = "an invented length",
                                  .subject = "disc",
                                  .on_sky = true};

static lac_status add_with(const char *name, const char *unit, const char *range, int *id) {
  lac_name changed = invented;
  changed.name = name, changed.unit = unit, changed.range = range, changed.on_sky = false;
  return lac_catalogue_add_name(catalogue, &changed, id);
}

static void ranges_are_read(void **state) {
  (void)state;
  const struct {
    const char *name, *unit, *range;
    lac_range want;
  } cases[] = {
      {"range_a", "1", "any", {-INFINITY, INFINITY, false, false}},
      {"range_b", "1", "> 0", {0, INFINITY, false, false}},
      {"range_c", "1", ">= -2.5", {-2.5, INFINITY, true, false}},
      {"range_d", "1", "0 .. 1", {0, 1, true, true}},
      {"range_e", "1", "0 .. < 1", {0, 1, true, false}},
      {"range_f", "1", "> 0 .. 1", {0, 1, false, true}},
      {"range_g", "1", "> 0 .. < 1e-3", {0, 1e-3, false, false}},
      {"range_h", "km", "1 .. 2 km", {1, 2000, true, true}},
      {"range_i", "deg", "0 deg .. 180 deg", {0, 3.141592653589793, true, true}},
  };
  for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
    int id = -1;
    assert_int_equal(add_with(cases[i].name, cases[i].unit, cases[i].range, &id), LAC_OK);
    const lac_range got = lac_catalogue_range(catalogue, id), want = cases[i].want;
    assert_true(got.low == want.low && (got.high == want.high || fabs(got.high - want.high) <= DBL_EPSILON * want.high));
    assert_true(got.low_included == want.low_included && got.high_included == want.high_included);
  }
  const char *const malformed[] = {"", "0", "< 1", "1 .. 0", "> x", "0 ..", "0 .. 1 kg", "> 0 ± 1", "0..1", "any number"};
  for (size_t i = 0; i < sizeof malformed / sizeof malformed[0]; i++) {
    if (add_with("range_z", "1", malformed[i], NULL) != LAC_BAD_SYNTAX) print_error("# \"%s\"\n", malformed[i]);
    assert_int_equal(add_with("range_y", "1", malformed[i], NULL), LAC_BAD_SYNTAX);
  }
  const lac_range half_open = {0, 1, true, false};
  assert_true(lac_range_holds(half_open, 0) && !lac_range_holds(half_open, 1) && !lac_range_holds(half_open, -1e-300));
  assert_false(lac_range_holds(half_open, (double)NAN));
}

static void users_names_are_added(void **state) {
  (void)state;
  const int names = lac_catalogue_names(catalogue), rows = lac_catalogue_rows(catalogue);
  char text[] = "knot_radius";
  lac_name name = invented;
  name.name = text;
  int id = -1;
  assert_int_equal(lac_catalogue_add_name(catalogue, &name, &id), LAC_OK);
  text[0] = 'x'; /* strings are copied */
  assert_int_equal(id, names);
  assert_int_equal(lac_catalogue_find(catalogue, "knot_radius"), id);
  assert_int_equal(lac_catalogue_find(catalogue, "knot_radius_angle"), id + 1);
  assert_int_equal(lac_catalogue_find_synonym(catalogue, "knot"), id);
  assert_int_equal(lac_catalogue_rows(catalogue), rows + 2);
  assert_int_equal(add_with("knot_radius", "au", "> 0", NULL), LAC_DUPLICATE);
  assert_int_equal(add_with("knot_mass", "stones", "> 0", NULL), LAC_UNKNOWN_UNIT);
  assert_int_equal(add_with("knot mass", "kg", "> 0", NULL), LAC_BAD_SYNTAX);
  char longest[LAC_MAX_NAME + 2];
  memset(longest, 'k', sizeof longest), longest[LAC_MAX_NAME + 1] = '\0';
  assert_int_equal(add_with(longest, "kg", "> 0", NULL), LAC_BAD_SYNTAX);
  longest[LAC_MAX_NAME] = '\0';
  assert_int_equal(add_with(longest, "kg", "> 0", NULL), LAC_OK);
  /* A name whose angle is there already is not added by half. */
  assert_int_equal(add_with("knot_size_angle", "mas", "> 0", NULL), LAC_OK);
  lac_name half = invented;
  half.name = "knot_size", half.synonyms = "knot_s";
  assert_int_equal(lac_catalogue_add_name(catalogue, &half, NULL), LAC_DUPLICATE);
  assert_int_equal(lac_catalogue_find(catalogue, "knot_size"), -1);
  assert_int_equal(lac_catalogue_find_synonym(catalogue, "knot_s"), -1);
  assert_int_equal(lac_catalogue_find_synonym(catalogue, "R_H"), lac_catalogue_find(catalogue, "hill_radius"));
  half.name = "knot_weight", half.unit = "kg"; /* what is no length has no angle */
  assert_int_equal(lac_catalogue_add_name(catalogue, &half, NULL), LAC_WRONG_DIMENSION);
  assert_int_equal(lac_catalogue_names(catalogue), names + 4);
}

static void users_rows_are_added(void **state) {
  (void)state;
  const int rows = lac_catalogue_rows(catalogue);
  char by[] = "mine";
  lac_relation r = {.gives = "rim_radius",
                    .by = by,
                    .from = {"sublimation_radius", "stellar_radius"},
                    .kind = LAC_USERS,
                    .holds = {{"stellar_radius", 0, 1e12}}};
  int row = -1;
  assert_int_equal(lac_catalogue_add_relation(catalogue, &r, &row), LAC_OK);
  assert_int_equal(row, rows);
  by[0] = 'x';
  assert_string_equal(lac_catalogue_row(catalogue, row)->by, "mine");
  assert_int_equal(lac_catalogue_row(catalogue, row)->kind, LAC_USERS);
  assert_true(isnan(lac_relation_value(lac_catalogue_row(catalogue, row), (const double[]){1, 1})));
  by[0] = 'm';
  assert_int_equal(lac_catalogue_add_relation(catalogue, &r, NULL), LAC_DUPLICATE);
  r.by = "other", r.from[0] = "nonsense";
  assert_int_equal(lac_catalogue_add_relation(catalogue, &r, NULL), LAC_UNKNOWN_NAME);
  r.from[0] = "rim_radius";
  assert_int_equal(lac_catalogue_add_relation(catalogue, &r, NULL), LAC_CIRCLE);
  r.gives = "stellar_mass", r.from[0] = "hill_radius"; /* hill_radius rests on the mass ratio, that on the stellar mass */
  assert_int_equal(lac_catalogue_add_relation(catalogue, &r, NULL), LAC_CIRCLE);
  r.inverse_of = "hill_radius/hill";
  assert_int_equal(lac_catalogue_add_relation(catalogue, &r, NULL), LAC_OK);
  assert_int_equal(lac_catalogue_rows(catalogue), rows + 2);
  /* After the built-in recipes, before what is assumed. */
  lac_relation snow = {.gives = "snow_temperature", .by = "mine", .from = {"distance"}};
  assert_int_equal(lac_catalogue_add_relation(catalogue, &snow, &row), LAC_OK);
  int count;
  const int *of = lac_catalogue_rows_of(catalogue, lac_catalogue_find(catalogue, "snow_temperature"), &count);
  assert_true(count >= 2 && of[count - 2] == row && lac_catalogue_row(catalogue, of[count - 1])->kind == LAC_ASSUMED);
}

/* As many as a long script might add; each must be found, and the built-in rows stay where they were. */
static void many_names_are_added(void **state) {
  (void)state;
  const lac_name *first = lac_catalogue_name(catalogue, 0);
  for (int i = 0; i < 3000; i++) {
    char name[40];
    int id;
    snprintf(name, sizeof name, "many_%d", i);
    assert_int_equal(add_with(name, "1", "any", &id), LAC_OK);
    assert_int_equal(lac_catalogue_find(catalogue, name), id);
  }
  assert_ptr_equal(lac_catalogue_name(catalogue, 0), first);
  assert_true(lac_catalogue_find(catalogue, "many_0") >= 0 && lac_catalogue_find(catalogue, "many_3000") < 0);
}

static void sources_are_found(void **state) {
  (void)state;
  size_t count = 0;
  for (const lac_source *source; (source = lac_source_at(count)); count++) {
    expect(lac_source_find(source->id) == source, source->id, NULL, "stands twice");
    expect(is_text(source->authors), source->id, NULL, "has no authors");
  }
  assert_true(count > 0);
  assert_null(lac_source_at(count + 100));
  assert_null(lac_source_find("nobody_1900"));
  end_walk();
}

static void building_is_quick(void **state) {
  (void)state;
  double best = INFINITY;
  for (int i = 0; i < 20; i++) {
    struct timespec start, end;
    lac_catalogue *another;
    clock_gettime(CLOCK_MONOTONIC, &start);
    assert_int_equal(lac_catalogue_new(&another, NULL, 0), LAC_OK);
    clock_gettime(CLOCK_MONOTONIC, &end);
    lac_catalogue_free(another);
    best = fmin(best, 1e6 * (double)(end.tv_sec - start.tv_sec) + 1e-3 * (double)(end.tv_nsec - start.tv_nsec));
  }
  print_message("# %d names, %d rows, built in %.0f microseconds\n", lac_catalogue_names(catalogue), lac_catalogue_rows(catalogue), best);
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  const struct CMUnitTest tests[] = {
      FRESH(names_are_whole),       FRESH(synonyms_mean_one_name),      FRESH(rows_are_whole),
      FRESH(rows_stand_in_order),   FRESH(forward_rows_form_no_circle), FRESH(templates_are_expanded),
      FRESH(lengths_have_angles),   FRESH(nearest_names_are_offered),   FRESH(ranges_are_read),
      FRESH(users_names_are_added), FRESH(users_rows_are_added),        FRESH(many_names_are_added),
      FRESH(sources_are_found),     FRESH(building_is_quick),
  };
  return cmocka_run_group_tests(tests, NULL, NULL);
}
