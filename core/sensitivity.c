/* SPDX-License-Identifier: GPL-3.0-or-later */
/* First-order variance shares from one ensemble. The naive way, averages of y in bins of each input by itself, has all the scatter of the
   other inputs in it: some hundredths with ten thousand draws. Here all inputs are fitted at once, products of two besides, so that only
   what neither catches scatters; and the fitted functions' variances are integrals over the inputs' distributions, where those are known.
 */
#include "lacuna/sensitivity.h"

#include <math.h>
#include <stdbool.h>
#include <stdlib.h>
#include <string.h>

/* Hermite's polynomials of high degree hang on a few draws far out: above the fifth, ten thousand draws don't settle their coefficients. */
enum {
  HIGHEST_DEGREE = 12,
  HIGHEST_OF_NORMAL = 5,
  MOST_TERMS = 120,
  MOST_BINS = 200,
  DRAWS_A_TERM = 10,
  DRAWS_A_BIN = 50,
  POLL_EVERY = 1024
};

typedef struct {
  lac_work *work;
  size_t n, inputs, terms, bins; /* n: defined draws */
  size_t *first;                 /* of each input, then of the products of two: the first term; the terms' number + 1 behind the last */
  bool whole;                    /* all draws are defined: the inputs are distributed as they were given */
  const lac_share_input *x;
  const double *y;
  size_t *index;  /* of the defined draws */
  double *ranks;  /* of each input without a distribution: its place between 0 and 1; n for each input */
  double *centre; /* of each input: the mean of its first polynomial, so that products of two hold nothing of one alone */
  double *gram;   /* normal equations: (terms + 2)^2, of 1, the terms and y, lower triangle */
  double *fit;    /* coefficients of 1 and the terms */
  double *means;  /* of the terms over the draws */
  double *basis;  /* 1, the terms and y at one draw */
  double mean;    /* of y, taken off before anything else */
  double scale;   /* a power of two, so that squares of what is left neither overflow nor vanish */
} problem;

/* Polynomials 1 .. degree, orthonormal: of Hermite over the standard normal distribution, of Legendre over that from 0 to 1. */
static void hermite(double z, size_t degree, double *out) {
  double before = 1, now = z;
  for (size_t k = 1; k <= degree; k++) {
    out[k - 1] = now;
    const double next = (z * now - sqrt((double)k) * before) / sqrt((double)k + 1);
    before = now, now = next;
  }
}

static void legendre(double u, size_t degree, double *out) {
  const double t = 2 * u - 1;
  double before = 1, now = t;
  for (size_t k = 1; k <= degree; k++) {
    out[k - 1] = now * sqrt(2.0 * (double)k + 1);
    const double next = ((2.0 * (double)k + 1) * t * now - (double)k * before) / ((double)k + 1);
    before = now, now = next;
  }
}

/* Where a draw of an input stands in its distribution, 0 to 1. */
static double place(const problem *p, size_t input, size_t draw) {
  const double x = p->x[input].draws[p->index[draw]];
  switch (p->x[input].distribution) {
  case LAC_STANDARD_NORMAL: return erfc(-x * M_SQRT1_2) / 2;
  case LAC_STANDARD_UNIFORM: return x;
  default: return p->ranks[input * p->n + draw];
  }
}

static void evaluate_basis(const problem *p, size_t draw, double *out) {
  out[0] = 1;
  for (size_t i = 0; i < p->inputs; i++) {
    double *own = out + p->first[i];
    const size_t degree = p->first[i + 1] - p->first[i];
    if (p->x[i].distribution == LAC_STANDARD_NORMAL) hermite(p->x[i].draws[p->index[draw]], degree, own);
    else legendre(place(p, i, draw), degree, own);
  }
  double *product = out + p->first[p->inputs];
  for (size_t i = 1; i < p->inputs && product <= out + p->terms; i++)
    for (size_t j = 0; j < i; j++) *product++ = (out[p->first[i]] - p->centre[i]) * (out[p->first[j]] - p->centre[j]);
  out[p->terms + 1] = (p->y[p->index[draw]] - p->mean) * p->scale;
}

static bool stopped(const problem *p, size_t draw) {
  if (draw % POLL_EVERY != 0) return false;
  return p->work->stop || (p->work->poll && p->work->poll(p->work->context));
}

typedef struct {
  double x;
  size_t draw;
} ranked;

static int by_value(const void *a, const void *b) {
  const double x = ((const ranked *)a)->x, y = ((const ranked *)b)->x;
  return (x > y) - (x < y);
}

/* The ranks of an input among the defined draws, equal ones sharing theirs. */
static lac_status rank_draws(problem *p, size_t input) {
  ranked *list = malloc(p->n * sizeof *list);
  if (list == NULL) return LAC_NO_MEMORY;
  for (size_t t = 0; t < p->n; t++) list[t] = (ranked){p->x[input].draws[p->index[t]], t};
  qsort(list, p->n, sizeof *list, by_value);
  for (size_t first = 0, end; first < p->n; first = end) {
    for (end = first + 1; end < p->n && list[end].x == list[first].x;) end++;
    for (size_t t = first; t < end; t++) p->ranks[input * p->n + list[t].draw] = (double)(first + end) / 2 / (double)p->n;
  }
  free(list);
  return LAC_OK;
}

/* The means are 0 by nature where all draws are there. */
static lac_status find_centres(problem *p) {
  for (size_t t = 0; t < p->n && !p->whole; t++) {
    if (stopped(p, t)) return LAC_INTERRUPTED;
    evaluate_basis(p, t, p->basis);
    for (size_t i = 0; i < p->inputs; i++) p->means[i] += p->basis[p->first[i]] / (double)p->n;
  }
  memcpy(p->centre, p->means, p->inputs * sizeof *p->centre);
  return LAC_OK;
}

/* The sums of products of 1, terms and y over the draws, each over n. */
static lac_status sum_products(problem *p) {
  const size_t width = p->terms + 2;
  for (size_t t = 0; t < p->n; t++) {
    if (stopped(p, t)) return LAC_INTERRUPTED;
    evaluate_basis(p, t, p->basis);
    for (size_t i = 0; i < width; i++) {
      const double factor = p->basis[i];
      double *row = p->gram + i * width;
      for (size_t j = 0; j <= i; j++) row[j] += factor * p->basis[j];
    }
  }
  for (size_t i = 0; i < width * width; i++) p->gram[i] /= (double)p->n;
  memcpy(p->means, p->gram, sizeof *p->means); /* of 1 */
  for (size_t i = 1; i < width; i++) p->means[i] = p->gram[i * width];
  return LAC_OK;
}

/* Least squares by Cholesky's decomposition, in place. A term that follows from those before it (a rank of few values has few polynomials)
   is left out: its coefficient is 0. */
static void solve_normal_equations(problem *p) {
  const size_t width = p->terms + 2, count = p->terms + 1;
  double *g = p->gram;
  for (size_t i = 0; i < width; i++) {
    const double whole = g[i * width + i];
    for (size_t j = 0; j <= i; j++) {
      double sum = g[i * width + j];
      for (size_t k = 0; k < j; k++) sum -= g[i * width + k] * g[j * width + k];
      if (j < i) g[i * width + j] = g[j * width + j] > 0 ? sum / g[j * width + j] : 0;
      else g[i * width + i] = sum > 1e-9 * whole ? sqrt(sum) : 0;
    }
  }
  for (size_t i = count; i-- > 0;) {
    double sum = g[count * width + i];
    for (size_t k = i + 1; k < count; k++) sum -= g[k * width + i] * p->fit[k];
    p->fit[i] = g[i * width + i] > 0 ? sum / g[i * width + i] : 0;
  }
}

/* Whether an input's draws are a fair sample of a known distribution: then its polynomials are orthonormal. (The products: if all are.) */
static bool is_known(const problem *p, size_t input) {
  if (input == p->inputs) {
    for (size_t i = 0; i < p->inputs; i++)
      if (!is_known(p, i)) return false;
    return true;
  }
  return p->whole && p->x[input].distribution != LAC_ANY_DISTRIBUTION;
}

/* The fitted function of one input (or of the products) at the draw whose basis is there, less its mean. */
static double fitted(const problem *p, size_t input) {
  const bool known = is_known(p, input);
  double sum = 0;
  for (size_t k = p->first[input]; k < p->first[input + 1]; k++) sum += p->fit[k] * (p->basis[k] - (known ? 0 : p->means[k]));
  return sum;
}

static double residual(const problem *p) {
  double sum = p->basis[p->terms + 1] - p->fit[0];
  for (size_t k = 1; k <= p->terms; k++) sum -= p->fit[k] * p->basis[k];
  return sum;
}

typedef struct {
  double left;              /* variance that the polynomials leave */
  double *variance, *noise; /* of each input's polynomial and of the products; what the scatter of their coefficients adds to it */
  double *binned;           /* of the bins' means of what is left, for each input */
  double *own;              /* influence of one draw on each variance */
  double *sums, *counts;    /* of the bins: inputs x bins */
} variances;

static size_t bin_of(const problem *p, size_t input, size_t draw) {
  return (size_t)fmin(fmax(0, place(p, input, draw) * (double)p->bins), (double)(p->bins - 1));
}

static lac_status sum_variances(problem *p, variances *v) {
  for (size_t t = 0; t < p->n; t++) {
    if (stopped(p, t)) return LAC_INTERRUPTED;
    evaluate_basis(p, t, p->basis);
    const double e = residual(p);
    v->left += e * e;
    for (size_t i = 0; i <= p->inputs; i++) {
      const double f = fitted(p, i), count = (double)p->n;
      if (!is_known(p, i)) v->variance[i] += f * f / count;
      for (size_t k = p->first[i]; k < p->first[i + 1]; k++) v->noise[i] += p->basis[k] * e * p->basis[k] * e / (count * count);
      if (i == p->inputs) break;
      const size_t bin = i * p->bins + bin_of(p, i, t);
      v->sums[bin] += e, v->counts[bin]++;
    }
  }
  v->left /= (double)(p->n - p->terms - 1);
  for (size_t i = 0; i <= p->inputs; i++) {
    for (size_t k = p->first[i]; is_known(p, i) && k < p->first[i + 1]; k++) v->variance[i] += p->fit[k] * p->fit[k];
    v->variance[i] -= v->noise[i];
    if (i == p->inputs) break;
    for (size_t bin = i * p->bins; bin < (i + 1) * p->bins; bin++)
      if (v->counts[bin] > 0) v->binned[i] += v->sums[bin] * v->sums[bin] / v->counts[bin] / (double)p->n;
    v->binned[i] -= ((double)p->bins - (double)(p->first[i + 1] - p->first[i])) * (v->left - v->binned[i]) / (double)p->n;
  }
  return LAC_OK;
}

/* Shares, and their errors from the influence of each draw on them: a coefficient feels the residual times its polynomial. */
static lac_status find_shares(problem *p, const variances *v, lac_share *shares) {
  double whole = v->left;
  for (size_t i = 0; i <= p->inputs; i++) whole += v->variance[i];
  for (size_t i = 0; i < p->inputs; i++) shares[i] = (lac_share){fmax(0, (v->variance[i] + v->binned[i]) / whole), 0};
  for (size_t t = 0; t < p->n; t++) {
    if (stopped(p, t)) return LAC_INTERRUPTED;
    evaluate_basis(p, t, p->basis);
    const double e = residual(p);
    double all = e * e - v->left;
    for (size_t i = 0; i <= p->inputs; i++) {
      const double f = fitted(p, i);
      all += v->own[i] = 2 * f * e + (is_known(p, i) ? 0 : f * f - v->variance[i]);
    }
    for (size_t i = 0; i < p->inputs; i++) {
      const double influence = (v->own[i] - shares[i].share * all) / whole;
      shares[i].error += influence * influence;
    }
  }
  for (size_t i = 0; i < p->inputs; i++) shares[i].error = sqrt(shares[i].error) / (double)p->n;
  return LAC_OK;
}

static lac_status shares_with(problem *p, variances *v, lac_share *shares) {
  lac_status status = LAC_OK;
  for (size_t i = 0; i < p->inputs && status == LAC_OK; i++)
    if (p->x[i].distribution == LAC_ANY_DISTRIBUTION) status = rank_draws(p, i);
  if (status == LAC_OK) status = find_centres(p);
  if (status == LAC_OK) status = sum_products(p);
  if (status != LAC_OK) return status;
  const double whole = p->gram[(p->terms + 2) * (p->terms + 2) - 1];
  const double mean = p->mean * p->scale;
  if (!(whole > 1e-24 * mean * mean)) {
    for (size_t i = 0; i < p->inputs; i++) shares[i] = (lac_share){(double)NAN, (double)NAN};
    return LAC_OK;
  }
  solve_normal_equations(p);
  status = sum_variances(p, v);
  return status == LAC_OK ? find_shares(p, v, shares) : status;
}

static bool is_defined(const double *y, size_t inputs, const lac_share_input *x, size_t t) {
  bool defined = isfinite(y[t]);
  for (size_t i = 0; i < inputs; i++) defined = defined && isfinite(x[i].draws[t]);
  return defined;
}

static double find_scale(const problem *p) {
  double largest = 0;
  int exponent;
  for (size_t t = 0; t < p->n; t++) largest = fmax(largest, fabs(p->y[p->index[t]] - p->mean));
  frexp(largest, &exponent);
  return ldexp(1, exponent < -1000 ? 1000 : -exponent);
}

/* Fewer terms where there are few draws or many inputs. */
static void choose_terms(problem *p) {
  size_t degree = MOST_TERMS / p->inputs / (p->inputs > 5 ? 2 : 1), affordable = p->n / (DRAWS_A_TERM * p->inputs);
  if (degree > affordable) degree = affordable;
  if (degree > HIGHEST_DEGREE) degree = HIGHEST_DEGREE;
  if (degree < 1) degree = 1;
  p->first[0] = 1;
  for (size_t i = 0; i < p->inputs; i++) {
    const bool low = p->x[i].distribution == LAC_STANDARD_NORMAL && degree > HIGHEST_OF_NORMAL;
    p->first[i + 1] = p->first[i] + (low ? HIGHEST_OF_NORMAL : degree);
  }
  const size_t products = p->inputs * (p->inputs - 1) / 2, so_far = p->first[p->inputs] - 1;
  const bool affordable_too = so_far + products <= MOST_TERMS && (so_far + products) * DRAWS_A_TERM <= p->n;
  p->terms = so_far + (affordable_too ? products : 0);
  p->first[p->inputs + 1] = p->terms + 1;
  p->bins = p->n / DRAWS_A_BIN;
  if (p->bins > MOST_BINS) p->bins = MOST_BINS;
  if (p->bins < degree + 1) p->bins = degree + 1;
}

lac_status lac_first_order_shares(lac_work *work, size_t n, const double *y, size_t inputs, const lac_share_input *x, lac_share *shares,
                                  size_t *defined) {
  problem p = {.work = work, .inputs = inputs, .x = x, .y = y, .index = malloc((n + inputs + 2) * sizeof *p.index)};
  if (p.index == NULL) return LAC_NO_MEMORY;
  for (size_t t = 0; t < n; t++)
    if (is_defined(y, inputs, x, t)) {
      p.index[p.n++] = t;
      p.mean += (y[t] - p.mean) / (double)p.n;
    }
  *defined = p.n;
  p.first = p.index + n;
  p.whole = p.n == n;
  p.scale = find_scale(&p);
  if (p.n < DRAWS_A_TERM * inputs || inputs == 0) return free(p.index), LAC_TOO_MANY;
  choose_terms(&p);
  const size_t width = p.terms + 2, bins = inputs * p.bins;
  double *room = calloc(inputs * p.n + width * width + 3 * width + 5 * (inputs + 1) + 2 * bins, sizeof *room);
  lac_status status = LAC_NO_MEMORY;
  if (room != NULL) {
    p.ranks = room, p.gram = p.ranks + inputs * p.n, p.fit = p.gram + width * width, p.means = p.fit + width, p.basis = p.means + width;
    variances v = {.variance = p.basis + width};
    v.noise = v.variance + inputs + 1, v.binned = v.noise + inputs + 1, v.own = v.binned + inputs + 1;
    p.centre = v.own + inputs + 1, v.sums = p.centre + inputs + 1, v.counts = v.sums + bins;
    status = shares_with(&p, &v, shares);
  }
  free(room);
  free(p.index);
  return status;
}
