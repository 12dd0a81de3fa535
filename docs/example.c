/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The library from C: Jupiter as it would be around a star at 100 ± 5 pc. First one number for each name of a chain, with the relation
   that gives it; then the same chain with an error bar on the distance, and a quantile of its draws.

     gcc -std=c11 example.c $(pkg-config --cflags --libs lacuna) && ./a.out */
#include <lacuna.h>
#include <stdio.h>
#include <stdlib.h>

enum { GIVENS = 3, DRAWS = 10000 };
static const char *const names[GIVENS] = {"planet_semi_major_axis", "planet_star_mass_ratio", "distance"};
static const double numbers[GIVENS] = {5.2038 * LAC_AU, 9.5458e-4, 100 * LAC_PC}; /* SI */

static lac_status print_single(const lac_catalogue *catalogue, const lac_chain *chain, int asked) {
  const size_t count = (size_t)lac_catalogue_names(catalogue);
  double *values = calloc(count, sizeof *values);
  int *steps = calloc(count, sizeof *steps);
  if (values && steps) {
    for (int i = 0; i < GIVENS; i++) values[lac_catalogue_find(catalogue, names[i])] = numbers[i];
    lac_chain_values(chain, values);
    const int n = lac_chain_steps(chain, asked, steps);
    for (int i = 0; i < n; i++) {
      const lac_name *name = lac_catalogue_name(catalogue, steps[i]);
      const int row = lac_chain_row(chain, steps[i]);
      printf("%s = %.5g %s, %s\n", name->name, values[steps[i]] / lac_catalogue_unit(catalogue, steps[i]).factor, name->unit,
             row == LAC_GIVEN ? "given" : lac_catalogue_row(catalogue, row)->by);
    }
  }
  const lac_status status = values && steps ? LAC_OK : LAC_NO_MEMORY;
  free(values);
  free(steps);
  return status;
}

/* Values that go wrong on the way are NULL, which lac_value_drop takes. */
static lac_status give(const lac_catalogue *catalogue, lac_value **values) {
  const int distance = lac_catalogue_find(catalogue, "distance");
  lac_axis *draw;
  lac_status status = lac_axis_new("draw", DRAWS, NULL, &draw);
  for (int i = 0; i < GIVENS && status == LAC_OK; i++) {
    const int id = lac_catalogue_find(catalogue, names[i]);
    const lac_spread spread = {.kind = LAC_NORMAL, .a = numbers[i], .b = 5 * LAC_PC, .key = lac_draws_key(1, NULL, names[i])};
    status = id == distance ? lac_value_drawn(draw, &spread, &values[id]) : lac_value_number(numbers[i], &values[id]);
  }
  lac_axis_drop(draw); /* the value keeps it */
  return status;
}

static lac_status print_median(const lac_catalogue *catalogue, const lac_chain *chain, int asked) {
  const int count = lac_catalogue_names(catalogue);
  lac_value **values = calloc((size_t)count, sizeof *values), *median = NULL;
  const double half = 0.5;
  lac_work work;
  if (!values) return LAC_NO_MEMORY;
  lac_work_start(&work, 1, (size_t)1 << 30);
  lac_status status = give(catalogue, values);
  if (status == LAC_OK) status = lac_plan_ask(chain, values, asked);
  if (status == LAC_OK) status = lac_plan_quantiles(&work, values[asked], "draw", 1, &half, &median);
  if (status == LAC_OK) printf("median of %d draws: %.2f mas\n", DRAWS, lac_value_as_number(median) / LAC_MAS);
  lac_value_drop(median);
  for (int id = 0; id < count; id++) lac_value_drop(values[id]);
  lac_work_end(&work);
  free(values);
  return status;
}

int main(void) {
  char error[200] = "";
  lac_catalogue *catalogue;
  lac_chain *chain = NULL;
  lac_status status = lac_catalogue_new(&catalogue, error, sizeof error);
  if (status == LAC_OK) {
    const int asked = lac_catalogue_find(catalogue, "hill_radius_angle");
    bool *given = calloc((size_t)lac_catalogue_names(catalogue), sizeof *given);
    for (int i = 0; i < GIVENS && given; i++) given[lac_catalogue_find(catalogue, names[i])] = true;
    status = given ? lac_chain_settle(catalogue, given, NULL, &chain, NULL) : LAC_NO_MEMORY;
    free(given);
    if (status == LAC_OK) status = print_single(catalogue, chain, asked);
    if (status == LAC_OK) status = print_median(catalogue, chain, asked);
  }
  if (status != LAC_OK) fprintf(stderr, "example: %s %s\n", lac_status_words(status), error);
  lac_chain_free(chain);
  lac_catalogue_free(catalogue);
  return status == LAC_OK ? 0 : 1;
}
