/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Populations of grains: compact or porous spheres of one mixture, integrated over their sizes, with opacities per unit mass of dust.
   A population is tabulated once. The table's wavelengths are found by halving: an interval whose middle is not met by the cubic
   through its neighbours is halved again, so that bands get many wavelengths and power laws few. The radii are those of a
   Gauss-Legendre rule in ln a, as dense as a trial at a few wavelengths asks for.
   Outside what the materials hold for, the index stays what it is at the end (the means over black bodies need some value there), but
   no opacity is given, unless the recipe extrapolates: then the models' formulas are followed.
   Sources: Bohren & Huffman 1983, ch. 4; size average kappa = int pi a^2 Q n da / int (4/3) pi a^3 rho n da. */
#include <float.h>
#include <gsl/gsl_integration.h>
#include <math.h>
#include <stdatomic.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "grains.h"
#include "steps.h"

enum { RULE = 8, FIRST_INTERVALS = 96 }; /* Gauss-Legendre points of a panel; intervals that the opacity table starts from */
#define SMALLEST_X 1e-6                  /* what lac_mie takes */
#define LARGEST_X 1e5
#define TABLE_TOLERANCE 1e-3 /* at the middle of an interval; a third of what is promised */
#define SIZE_TOLERANCE 2e-4  /* of one panel of sizes, in the average */
#define NEGLIGIBLE 1e-3      /* absorption or scattering below this share of the extinction is met as a part of that share alone */

#define DENSEST 256.0 /* radii for each e-fold */
#define FINEST 1e-3   /* in ln lambda: single grains' resonances are not followed below */

/* ---- work on many items ---- */

typedef struct {
  lac_work *work;
  lac_item_task *task;
  void *context;
  size_t count;
  int shares;
  atomic_int status;
} item_crew;

/* Neighbouring items cost alike (short wavelengths most), so they go to different threads. */
static void item_share(void *context, int share, bool calling) {
  item_crew *crew = context;
  for (size_t item = (size_t)share; item < crew->count; item += (size_t)crew->shares) {
    int none = LAC_OK;
    if (crew->work->stop || (calling && crew->work->poll && crew->work->poll(crew->work->context)))
      atomic_compare_exchange_strong(&crew->status, &none, LAC_INTERRUPTED);
    if (atomic_load(&crew->status) != LAC_OK) return;
    const lac_status status = crew->task(crew->context, item);
    none = LAC_OK;
    if (status != LAC_OK) atomic_compare_exchange_strong(&crew->status, &none, (int)status);
  }
}

lac_status lac_for_items(lac_work *work, size_t count, lac_item_task *task, void *context) {
  if (count == 0) return LAC_OK;
  const int threads = work->threads > 1 ? work->threads : 1;
  item_crew crew = {
      .work = work, .task = task, .context = context, .count = count, .shares = count < (size_t)threads ? (int)count : threads};
  lac_in_shares(crew.shares, item_share, &crew);
  return (lac_status)atomic_load(&crew.status);
}

/* ---- the grains' material ---- */

lac_status lac_grains_index(const lac_dust *dust, double wavelength, double *n, double *k) {
  const lac_dust_recipe *recipe = &dust->recipe;
  double each_n[LAC_MAX_COMPONENTS + 1], each_k[LAC_MAX_COMPONENTS + 1];
  for (size_t i = 0; i < recipe->components; i++) {
    double shortest, longest;
    lac_material_holds(recipe->material[i], recipe->temperature, &shortest, &longest);
    const double at = recipe->extrapolate ? wavelength : fmin(fmax(wavelength, shortest), longest);
    const lac_status status = lac_material_index(recipe->material[i], at, recipe->temperature, recipe->extrapolate, &each_n[i], &each_k[i]);
    if (status != LAC_OK && status != LAC_DOUBTFUL) return status;
  }
  if (dust->mixed == 1) {
    *n = each_n[0];
    *k = each_k[0];
    return LAC_OK;
  }
  if (dust->mixed > recipe->components) {
    each_n[recipe->components] = 1;
    each_k[recipe->components] = 0;
  }
  if (recipe->mixing == LAC_MAXWELL_GARNETT) return lac_mix_maxwell_garnett(dust->mixed, 0, dust->volume_fraction, each_n, each_k, n, k);
  return lac_mix_bruggeman(dust->mixed, dust->volume_fraction, each_n, each_k, n, k);
}

/* Above the greatest x, geometric optics: efficiencies depend on the index, and on x only by the depth k x, as long as light passes
   through at all. A k with the same depth at the greatest x is then the same sphere; where k is too large for light to pass, it stays. */
static double same_depth(double k, double x, double greatest_x) { return fmax(k, fmin(k * x / greatest_x, 20 / greatest_x)); }

lac_status lac_grains_efficiencies(size_t count, double *x, double *n, double *k, double greatest_x, lac_efficiencies *out) {
  double given[LAC_BLOCK];
  for (size_t done = 0; done < count; done += LAC_BLOCK) {
    const size_t some = count - done < LAC_BLOCK ? count - done : LAC_BLOCK;
    for (size_t i = 0; i < some; i++) {
      double *at = &x[done + i];
      given[i] = *at;
      if (*at > greatest_x) k[done + i] = same_depth(k[done + i], *at, greatest_x);
      *at = fmin(fmax(*at, SMALLEST_X), greatest_x);
    }
    const lac_status status = lac_mie(some, x + done, n + done, k + done, out + done);
    if (status != LAC_OK) return status;
    for (size_t i = 0; i < some; i++) { /* below, Rayleigh's limit */
      const double ratio = given[i] / SMALLEST_X;
      if (!(ratio < 1)) continue;
      lac_efficiencies *q = &out[done + i];
      q->absorption *= ratio;
      q->scattering *= ratio * ratio * ratio * ratio;
      q->backscatter *= ratio * ratio * ratio * ratio;
      q->extinction = q->absorption + q->scattering;
    }
  }
  return LAC_OK;
}

/* ---- sizes ---- */

void lac_sizes_free(lac_sizes *sizes) {
  free(sizes->radius);
  *sizes = (lac_sizes){0};
}

static double number_per_ln_size(const lac_dust_recipe *recipe, double ln_radius) {
  if (recipe->sizes == LAC_POWER_LAW) return exp((1 - recipe->index) * (ln_radius - log(recipe->smallest)));
  const double off = (ln_radius - log(recipe->median)) / recipe->width;
  return exp(-0.5 * off * off);
}

/* Gauss-Legendre's rule in ln a on panels that lie between the given ends. */
static lac_status place_radii(const lac_dust *dust, size_t panels, const double *end, lac_sizes *sizes) {
  *sizes = (lac_sizes){.count = panels * RULE, .radius = calloc(2 * panels * RULE, sizeof(double))};
  gsl_integration_glfixed_table *rule = gsl_integration_glfixed_table_alloc(RULE);
  for (size_t i = 0; i < sizes->count && rule && sizes->radius; i++) {
    const size_t panel = i / RULE;
    double at, weight;
    gsl_integration_glfixed_point(end[panel], end[panel + 1], i % RULE, &at, &weight, rule);
    sizes->weight = sizes->radius + sizes->count;
    sizes->radius[i] = exp(at);
    sizes->weight[i] = weight * number_per_ln_size(&dust->recipe, at);
  }
  const lac_status status = rule && sizes->radius ? LAC_OK : LAC_NO_MEMORY;
  if (rule) gsl_integration_glfixed_table_free(rule);
  if (status != LAC_OK) lac_sizes_free(sizes);
  return status;
}

/* From numbers of grains to cross sections per mass. */
static void divide_by_mass(const lac_dust *dust, lac_sizes *sizes) {
  double mass = 0;
  for (size_t i = 0; i < sizes->count; i++) {
    const double a = sizes->radius[i];
    mass += 4.0 / 3 * M_PI * a * a * a * dust->density * sizes->weight[i];
  }
  for (size_t i = 0; i < sizes->count; i++) sizes->weight[i] *= M_PI * sizes->radius[i] * sizes->radius[i] / mass;
}

static lac_status single_size(const lac_dust *dust, lac_sizes *sizes) {
  *sizes = (lac_sizes){.count = 1, .radius = calloc(2, sizeof(double))};
  if (!sizes->radius) return LAC_NO_MEMORY;
  sizes->weight = sizes->radius + 1;
  sizes->radius[0] = dust->recipe.median;
  sizes->weight[0] = 1;
  divide_by_mass(dust, sizes);
  return LAC_OK;
}

/* The ends of even panels, malloc'ed; a log-normal gets one or more for each of its widths. */
static double *even_panels(const lac_dust_recipe *recipe, double radii_per_efold, size_t *panels) {
  const double panel = recipe->sizes == LAC_LOG_NORMAL_SIZES ? fmin(RULE / radii_per_efold, recipe->width) : RULE / radii_per_efold;
  const double low = log(recipe->smallest), range = log(recipe->largest / recipe->smallest);
  *panels = (size_t)ceil(range / panel - 1e-9);
  if (*panels == 0) *panels = 1;
  double *end = malloc((*panels + 1) * sizeof *end);
  for (size_t i = 0; end && i <= *panels; i++) end[i] = low + range * ((double)i / (double)*panels);
  return end;
}

lac_status lac_sizes_new(const lac_dust *dust, double radii_per_efold, lac_sizes *sizes) {
  *sizes = (lac_sizes){0};
  if (dust->recipe.sizes == LAC_SINGLE_SIZE) return single_size(dust, sizes);
  size_t panels;
  double *end = even_panels(&dust->recipe, radii_per_efold, &panels);
  const lac_status status = end ? place_radii(dust, panels, end, sizes) : LAC_NO_MEMORY;
  free(end);
  if (status == LAC_OK) divide_by_mass(dust, sizes);
  return status;
}

/* ---- opacities ---- */

static lac_opacity completed(double absorption, double scattering, double asymmetry) {
  const double extinction = absorption + scattering, effective = scattering * (1 - asymmetry);
  return (lac_opacity){.absorption = absorption,
                       .scattering = scattering,
                       .extinction = extinction,
                       .asymmetry = asymmetry,
                       .albedo = scattering / extinction,
                       .effective_albedo = effective / (absorption + effective)};
}

/* Efficiencies of all radii at one wavelength; the workspace has room for three numbers each. */
static lac_status efficiencies_at(const lac_dust *dust, const lac_sizes *sizes, double wavelength, double *workspace, lac_efficiencies *q) {
  const size_t count = sizes->count;
  double *x = workspace, *n = x + count, *k = n + count, one_n, one_k;
  const lac_status status = lac_grains_index(dust, wavelength, &one_n, &one_k);
  if (status != LAC_OK) return status;
  for (size_t i = 0; i < count; i++) {
    x[i] = 2 * M_PI * sizes->radius[i] / wavelength;
    n[i] = one_n;
    k[i] = one_k;
  }
  return lac_grains_efficiencies(count, x, n, k, LARGEST_X, q);
}

static lac_opacity averaged(const lac_sizes *sizes, const lac_efficiencies *q) {
  double absorption = 0, scattering = 0, forward = 0;
  for (size_t i = 0; i < sizes->count; i++) {
    absorption += sizes->weight[i] * q[i].absorption;
    scattering += sizes->weight[i] * q[i].scattering;
    forward += sizes->weight[i] * q[i].scattering * q[i].asymmetry;
  }
  return completed(absorption, scattering, scattering > 0 ? forward / scattering : 0);
}

typedef struct {
  const lac_dust *dust;
  const lac_sizes *sizes;
  const double *wavelength;
  lac_opacity *opacity;
} opacity_task;

static lac_status one_opacity(void *context, size_t item) {
  const opacity_task *task = context;
  const size_t count = task->sizes->count;
  double *workspace = malloc(3 * count * sizeof(double) + count * sizeof(lac_efficiencies));
  if (!workspace) return LAC_NO_MEMORY;
  lac_efficiencies *q = (lac_efficiencies *)(void *)(workspace + 3 * count);
  const lac_status status = efficiencies_at(task->dust, task->sizes, task->wavelength[item], workspace, q);
  if (status == LAC_OK) task->opacity[item] = averaged(task->sizes, q);
  free(workspace);
  return status;
}

lac_status lac_grains_opacities(lac_work *work, const lac_dust *dust, const lac_sizes *sizes, size_t count, const double *wavelength,
                                lac_opacity *opacity) {
  opacity_task task = {dust, sizes, wavelength, opacity};
  return lac_for_items(work, count, one_opacity, &task);
}

/* Whether an approximation meets an opacity: each part within the tolerance, or so small a share of the extinction that it hardly counts.
 */
static bool meets(const lac_opacity *approximate, const lac_opacity *exact, double tolerance) {
  const double floor = NEGLIGIBLE * exact->extinction;
  return fabs(approximate->absorption - exact->absorption) <= tolerance * fmax(exact->absorption, floor) &&
         fabs(approximate->scattering - exact->scattering) <= tolerance * fmax(exact->scattering, floor) &&
         fabs(approximate->asymmetry - exact->asymmetry) <= tolerance;
}

/* ---- the radii of the table ---- */

/* Panels in ln a are halved until their halves agree with them, at wavelengths over the whole table, as well as the whole average asks:
   grains near a resonance of the largest need many, those in Rayleigh's limit few. */
enum { TRIALS = 24, SPARSE = 16, MOST_HALVINGS = 3 };

typedef struct {
  double absorption, scattering, forward;
} panel_sum;

/* The sums over each panel at each trial wavelength. */
typedef struct {
  const lac_dust *dust;
  lac_sizes sizes;
  double wavelength[TRIALS];
  size_t panels;
  panel_sum *sum; /* TRIALS for each panel */
} trial;

static lac_status try_wavelength(void *context, size_t t) {
  const trial *task = context;
  const size_t count = task->sizes.count;
  double *workspace = malloc(3 * count * sizeof(double) + count * sizeof(lac_efficiencies));
  if (!workspace) return LAC_NO_MEMORY;
  lac_efficiencies *q = (lac_efficiencies *)(void *)(workspace + 3 * count);
  const lac_status status = efficiencies_at(task->dust, &task->sizes, task->wavelength[t], workspace, q);
  for (size_t i = 0; i < count && status == LAC_OK; i++) {
    panel_sum *sum = &task->sum[i / RULE * TRIALS + t];
    const double weight = task->sizes.weight[i];
    sum->absorption += weight * q[i].absorption;
    sum->scattering += weight * q[i].scattering;
    sum->forward += weight * q[i].scattering * q[i].asymmetry;
  }
  free(workspace);
  return status;
}

/* Weights here are not divided by the mass: only ratios are looked at. */
static lac_status try_panels(lac_work *work, const lac_dust *dust, size_t panels, const double *end, trial *task) {
  task->dust = dust;
  task->panels = panels;
  for (int t = 0; t < TRIALS; t++) task->wavelength[t] = 1.5e-7 * pow(6e-3 / 1.5e-7, (double)t / (TRIALS - 1));
  lac_status status = place_radii(dust, panels, end, &task->sizes);
  for (size_t i = 0; i < task->sizes.count && status == LAC_OK; i++) task->sizes.weight[i] *= task->sizes.radius[i] * task->sizes.radius[i];
  task->sum = calloc(panels * TRIALS, sizeof *task->sum);
  if (!task->sum) status = LAC_NO_MEMORY;
  if (status == LAC_OK) status = lac_for_items(work, TRIALS, try_wavelength, task);
  return status;
}

static void trial_end(trial *task) {
  lac_sizes_free(&task->sizes);
  free(task->sum);
}

/* Whether a panel's halves agree with it at all wavelengths, as shares of the whole. */
static bool halves_agree(const panel_sum *panel, const panel_sum *halves, const panel_sum *whole) {
  for (int t = 0; t < TRIALS; t++) {
    const panel_sum *one = &halves[t], *other = &halves[TRIALS + t];
    const double floor = NEGLIGIBLE * (whole[t].absorption + whole[t].scattering);
    if (!(fabs(one->absorption + other->absorption - panel[t].absorption) <= SIZE_TOLERANCE * fmax(whole[t].absorption, floor)))
      return false;
    if (!(fabs(one->scattering + other->scattering - panel[t].scattering) <= SIZE_TOLERANCE * fmax(whole[t].scattering, floor)))
      return false;
    if (!(fabs(one->forward + other->forward - panel[t].forward) <= SIZE_TOLERANCE * fmax(whole[t].scattering, floor))) return false;
  }
  return true;
}

static void add_up(const trial *task, panel_sum *whole) {
  for (size_t i = 0; i < task->panels * TRIALS; i++) {
    panel_sum *sum = &whole[i % TRIALS];
    sum->absorption += task->sum[i].absorption;
    sum->scattering += task->sum[i].scattering;
    sum->forward += task->sum[i].forward;
  }
}

/* Which of the first panels, all alike, a later one lies in. */
static size_t first_panel(const double *end, size_t i, double low, double width) {
  return (size_t)((0.5 * (end[i] + end[i + 1]) - low) / width);
}

/* One round: the panels inside each first one of which one is not confirmed by its halves are all halved, for at the wavelengths between
   the trials a resonance lies elsewhere in it. *end is malloc'ed anew; open tells which of the first panels may be halved still. */
static lac_status halve_panels(lac_work *work, const lac_dust *dust, double width, bool *open, size_t *panels, double **end) {
  const size_t before = *panels;
  const double low = (*end)[0];
  size_t after = 0;
  trial coarse = {0}, fine = {0};
  panel_sum whole[TRIALS] = {{0, 0, 0}};
  bool *failed = calloc(before, sizeof *failed);
  double *halves = malloc((2 * before + 1) * sizeof *halves), *kept = malloc((2 * before + 1) * sizeof *kept);
  lac_status status = halves && kept && failed ? LAC_OK : LAC_NO_MEMORY;
  for (size_t i = 0; i < before && status == LAC_OK; i++) {
    halves[2 * i] = (*end)[i];
    halves[2 * i + 1] = 0.5 * ((*end)[i] + (*end)[i + 1]);
    halves[2 * i + 2] = (*end)[i + 1];
  }
  if (status == LAC_OK) status = try_panels(work, dust, before, *end, &coarse);
  if (status == LAC_OK) status = try_panels(work, dust, 2 * before, halves, &fine);
  if (status == LAC_OK) {
    add_up(&fine, whole);
    for (size_t i = 0; i < before; i++)
      if (!halves_agree(&coarse.sum[i * TRIALS], &fine.sum[2 * i * TRIALS], whole)) failed[first_panel(*end, i, low, width)] = true;
    kept[0] = halves[0];
    for (size_t i = 0; i < before; i++) {
      const size_t first = first_panel(*end, i, low, width);
      if (failed[first] && open[first]) kept[++after] = halves[2 * i + 1];
      else open[first] = false;
      kept[++after] = halves[2 * i + 2];
    }
    free(*end);
    *end = kept;
    *panels = after;
  } else {
    free(kept);
  }
  trial_end(&coarse);
  trial_end(&fine);
  free(halves);
  free(failed);
  return status;
}

static lac_status choose_sizes(lac_work *work, lac_dust *dust) {
  if (dust->recipe.sizes == LAC_SINGLE_SIZE) return single_size(dust, &dust->sizes);
  size_t panels, before;
  double *end = even_panels(&dust->recipe, SPARSE, &panels);
  const double width = end ? (end[panels] - end[0]) / (double)panels : 0;
  bool *open = malloc(panels * sizeof *open);
  lac_status status = end && open ? LAC_OK : LAC_NO_MEMORY;
  for (size_t i = 0; i < panels && status == LAC_OK; i++) open[i] = true;
  int round = 0;
  do {
    before = panels;
    if (status == LAC_OK) status = halve_panels(work, dust, width, open, &panels, &end);
  } while (status == LAC_OK && panels > before && ++round < MOST_HALVINGS);
  if (status == LAC_OK) status = place_radii(dust, panels, end, &dust->sizes);
  if (status == LAC_OK) divide_by_mass(dust, &dust->sizes);
  free(end);
  free(open);
  return status;
}

/* ---- the wavelengths of the table ---- */

enum { LN_ABSORPTION, LN_SCATTERING, ASYMMETRY, TABLED };

static lac_opacity opacity_of(const double *value) {
  return completed(exp(value[LN_ABSORPTION]), exp(value[LN_SCATTERING]), fmin(fmax(value[ASYMMETRY], -1), 1));
}

static bool opacities_agree(size_t width, const double *guess, const double *exact) {
  (void)width;
  const lac_opacity one = opacity_of(guess), other = opacity_of(exact);
  return meets(&one, &other, TABLE_TOLERANCE);
}

typedef struct {
  lac_work *work;
  const lac_dust *dust;
} table_maker;

static lac_status sample_opacities(void *context, size_t count, const double *ln_wavelength, double *values) {
  const table_maker *maker = context;
  double *wavelength = calloc(count, sizeof(lac_opacity) + sizeof(double));
  if (!wavelength) return LAC_NO_MEMORY;
  lac_opacity *opacity = (lac_opacity *)(void *)(wavelength + count);
  for (size_t i = 0; i < count; i++) wavelength[i] = exp(ln_wavelength[i]);
  const lac_status status = lac_grains_opacities(maker->work, maker->dust, &maker->dust->sizes, count, wavelength, opacity);
  for (size_t i = 0; i < count && status == LAC_OK; i++) {
    values[i * TABLED + LN_ABSORPTION] = log(fmax(opacity[i].absorption, DBL_MIN));
    values[i * TABLED + LN_SCATTERING] = log(fmax(opacity[i].scattering, DBL_MIN));
    values[i * TABLED + ASYMMETRY] = opacity[i].asymmetry;
  }
  free(wavelength);
  return status;
}

static lac_status fill_tables(lac_work *work, lac_dust *dust) {
  table_maker maker = {work, dust};
  lac_status status = choose_sizes(work, dust);
  dust->opacity.width = TABLED;
  if (status == LAC_OK)
    status = lac_table_fill(log(LAC_TABLE_SHORTEST), log(LAC_TABLE_LONGEST), FIRST_INTERVALS, FINEST, sample_opacities, opacities_agree,
                            &maker, &dust->opacity);
  if (status == LAC_OK) status = lac_planck_tables_fill(work, dust);
  return status;
}

lac_opacity lac_dust_tabled_opacity(const lac_dust *dust, double wavelength) {
  double weight[4], value[TABLED] = {0};
  const size_t first = lac_cubic_weights(dust->opacity.count, dust->opacity.place, log(wavelength), weight);
  for (size_t i = 0; i < 4; i++)
    for (size_t v = 0; v < TABLED; v++) value[v] += weight[i] * dust->opacity.value[(first + i) * TABLED + v];
  return opacity_of(value);
}

double lac_dust_tabled_ln_absorption(const lac_dust *dust, double ln_wavelength) {
  double weight[4];
  const double *value =
      dust->opacity.value + lac_cubic_weights(dust->opacity.count, dust->opacity.place, ln_wavelength, weight) * TABLED + LN_ABSORPTION;
  return weight[0] * value[0] + weight[1] * value[TABLED] + weight[2] * value[2 * TABLED] + weight[3] * value[3 * TABLED];
}

static bool has_opacity(const lac_dust *dust, double wavelength) {
  return wavelength >= LAC_TABLE_SHORTEST && wavelength <= LAC_TABLE_LONGEST &&
         (dust->recipe.extrapolate || !lac_dust_extrapolated(dust, wavelength));
}

static const lac_opacity no_opacity = {(double)NAN, (double)NAN, (double)NAN, (double)NAN, (double)NAN, (double)NAN};

lac_opacity lac_dust_opacity(const lac_dust *dust, double wavelength) {
  return has_opacity(dust, wavelength) ? lac_dust_tabled_opacity(dust, wavelength) : no_opacity;
}

lac_status lac_dust_opacity_direct(const lac_dust *dust, double wavelength, lac_opacity *opacity) {
  *opacity = no_opacity;
  if (!has_opacity(dust, wavelength)) return LAC_OUT_OF_RANGE;
  lac_sizes sizes = {0};
  lac_status status = lac_sizes_new(dust, DENSEST, &sizes);
  opacity_task task = {dust, &sizes, &wavelength, opacity};
  if (status == LAC_OK) status = one_opacity(&task, 0);
  lac_sizes_free(&sizes);
  return status;
}

double lac_dust_density(const lac_dust *dust) { return dust->density; }
bool lac_dust_extrapolated(const lac_dust *dust, double wavelength) {
  return !(wavelength >= dust->shortest && wavelength <= dust->longest);
}
void lac_dust_holds(const lac_dust *dust, double *shortest, double *longest) {
  *shortest = dust->shortest;
  *longest = dust->longest;
}

/* ---- recipes ---- */

#define SMALLEST_SIZE 1e-10
#define LARGEST_SIZE 1.0

/* What is wrong with the sizes, in words; NULL if nothing. */
static const char *wrong_sizes(const lac_dust_recipe *r) {
  const bool single = r->sizes == LAC_SINGLE_SIZE, power = r->sizes == LAC_POWER_LAW;
  if (!power && !(r->median >= SMALLEST_SIZE && r->median <= LARGEST_SIZE)) return "the size must be from 0.1 nm to 1 m";
  if (single) return NULL;
  if (!(r->smallest >= SMALLEST_SIZE && r->largest <= LARGEST_SIZE)) return "the smallest and the largest size must be from 0.1 nm to 1 m";
  if (!(r->smallest < r->largest)) return "the smallest size must be below the largest";
  if (power && !(fabs(r->index) <= 20)) return "the index of the sizes must be from -20 to 20";
  if (!power && !(r->width >= 0.01 && r->width <= 5))
    return "the width of the sizes must be from 0.01 to 5 (the standard deviation of ln a)";
  return NULL;
}

static const char *wrong_mixture(const lac_dust_recipe *r, double sum) {
  if (r->components < 1 || r->components > LAC_MAX_COMPONENTS) return "dust wants from one to eight materials";
  for (size_t i = 0; i < r->components; i++)
    if (!r->material[i] || !(r->mass_fraction[i] >= 0)) return "mass fractions must be >= 0";
  if (!(fabs(sum - 1) <= 1e-6)) return "mass fractions must sum to 1";
  if (!(r->porosity >= 0 && r->porosity < 1)) return "the porosity must be from 0 to below 1";
  return NULL;
}

/* A recipe that can be made. Given back: LAC_OUT_OF_RANGE with the complaint. */
static lac_status check_recipe(const lac_dust_recipe *r, char *words, size_t size) {
  double sum = 0;
  for (size_t i = 0; i < r->components && i < LAC_MAX_COMPONENTS; i++) sum += r->mass_fraction[i];
  const char *wrong = wrong_mixture(r, sum);
  if (!wrong) wrong = wrong_sizes(r);
  if (!wrong && !isnan(r->temperature) && !(r->temperature >= 20 && r->temperature <= 273))
    wrong = "the temperature of the ice must be from 20 to 273 K";
  if (!wrong) return LAC_OK;
  if (words && strcmp(wrong, "mass fractions must sum to 1") == 0) snprintf(words, size, "%s; they sum to %.9g", wrong, sum);
  else if (words) snprintf(words, size, "%s", wrong);
  return LAC_OUT_OF_RANGE;
}

/* Volume fractions, density, and what all materials hold for. */
static void settle(lac_dust *dust) {
  lac_dust_recipe *r = &dust->recipe;
  double specific_volume = 0;
  for (size_t i = 0; i < r->components; i++) specific_volume += r->mass_fraction[i] / lac_material_about(r->material[i]).density;
  dust->density = (1 - r->porosity) / specific_volume;
  dust->shortest = LAC_TABLE_SHORTEST;
  dust->longest = LAC_TABLE_LONGEST;
  for (size_t i = 0; i < r->components; i++) {
    double shortest, longest;
    lac_material_holds(r->material[i], r->temperature, &shortest, &longest);
    dust->shortest = fmax(dust->shortest, shortest);
    dust->longest = fmin(dust->longest, longest);
    dust->volume_fraction[i] = dust->density * r->mass_fraction[i] / lac_material_about(r->material[i]).density;
  }
  dust->mixed = r->components;
  if (r->porosity > 0) dust->volume_fraction[dust->mixed++] = r->porosity;
}

lac_status lac_dust_new(lac_work *work, const lac_dust_recipe *recipe, lac_dust **dust, char *words, size_t size) {
  *dust = NULL;
  if (words && size > 0) *words = '\0';
  lac_status status = check_recipe(recipe, words, size);
  if (status != LAC_OK) return status;
  lac_dust *made = calloc(1, sizeof *made);
  if (!made) return LAC_NO_MEMORY;
  made->references = 1;
  made->recipe = *recipe;
  for (size_t i = 0; i < recipe->components; i++) lac_material_keep((lac_material *)(uintptr_t)recipe->material[i]);
  settle(made);
  status = made->shortest < made->longest ? fill_tables(work, made) : LAC_OUT_OF_RANGE;
  if (status == LAC_OUT_OF_RANGE && words && *words == '\0')
    snprintf(words, size,
             made->shortest < made->longest ? "its index is out of range at some wavelength"
                                            : "the materials share no wavelengths that they hold for, from 0.1 um to 1 cm");
  if (status == LAC_OK) *dust = made;
  else lac_dust_drop(made);
  return status;
}

lac_dust *lac_dust_keep(lac_dust *dust) {
  dust->references++;
  return dust;
}

void lac_dust_drop(const lac_dust *constant) {
  lac_dust *dust = (lac_dust *)(uintptr_t)constant;
  if (!dust || --dust->references > 0) return;
  for (size_t i = 0; i < dust->recipe.components; i++) lac_material_drop((lac_material *)(uintptr_t)dust->recipe.material[i]);
  lac_sizes_free(&dust->sizes);
  lac_table_free(&dust->opacity);
  lac_table_free(&dust->efficiency);
  free(dust);
}
