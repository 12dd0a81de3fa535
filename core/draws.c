/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Counter-based draws. Draws 2i and 2i+1 come from the generator's counter i under the spread's key: two uniforms of 64 bits, of which the
   upper 52 count, or the two normals that Box & Muller make of them. Words stand in arrays of their own, piece by piece, so that gcc
   vectorises the rounds on 32-bit lanes. Logarithm, sine and exponential are the kernels', the same on every processor. Sources: Salmon,
   Moraes, Dror & Shaw 2011, Proc. SC11, 16 (Philox 4x32-10); Box & Muller 1958, Annals of Mathematical Statistics 29, 610. */
#include "lacuna/draws.h"

#include "kernels_inline.h"

enum { PIECE = 256 }; /* counters at a time: words and draws stay in the first-level cache */

typedef struct {
  uint32_t word[4][PIECE];
} word_piece;

/* Philox 4x32-10 for one counter, and for a piece of counters from the given one on. Written once for words in lanes of 32 bits, where AVX2
   has the widening product, and for words in lanes of 64, which saves AVX-512 the shuffles. */
#define PHILOX(name, lane)                                                                                                                 \
  LAC_INLINE void philox_##name(lane word[4], uint32_t key_0, uint32_t key_1) {                                                            \
    _Pragma("GCC unroll 10") for (uint32_t round = 0; round < 10; round++) {                                                               \
      uint64_t first = (uint64_t)word[0] * 0xD2511F53u, second = (uint64_t)word[2] * 0xCD9E8D57u;                                          \
      word[0] = (lane)(second >> 32) ^ word[1] ^ (key_0 + round * 0x9E3779B9u);                                                            \
      word[2] = (lane)(first >> 32) ^ word[3] ^ (key_1 + round * 0xBB67AE85u);                                                             \
      word[1] = (uint32_t)second;                                                                                                          \
      word[3] = (uint32_t)first;                                                                                                           \
    }                                                                                                                                      \
  }                                                                                                                                        \
  LAC_CLONES static void draw_##name(word_piece *piece, uint64_t key, uint64_t counter) {                                                  \
    for (uint32_t i = 0; i < PIECE; i++) {                                                                                                 \
      uint32_t low = (uint32_t)counter + i, carry = low < i;                                                                               \
      lane word[4] = {low, (uint32_t)(counter >> 32) + carry, 0, 0};                                                                       \
      philox_##name(word, (uint32_t)key, (uint32_t)(key >> 32));                                                                           \
      for (int w = 0; w < 4; w++) piece->word[w][i] = (uint32_t)word[w];                                                                   \
    }                                                                                                                                      \
  }
PHILOX(narrow, uint32_t)
PHILOX(wide, uint64_t)
#undef PHILOX

static void draw_words(word_piece *piece, uint64_t key, uint64_t counter) {
  if (LAC_WIDE_PRODUCTS) draw_wide(piece, key, counter);
  else draw_narrow(piece, key, counter);
}

void lac_philox(const uint32_t counter[4], const uint32_t key[2], uint32_t out[4]) {
  memcpy(out, counter, 4 * sizeof out[0]);
  philox_narrow(out, key[0], key[1]);
}

/* An odd multiple of 2^-53 in (0, 1): never 0, never 1, mean exactly 1/2. */
LAC_INLINE double uniform_of(uint32_t low, uint32_t high) {
  uint64_t bits = ((uint64_t)high << 20) | (low >> 12);
  return lac_from_bits(bits | 0x3ff0000000000000) - (1 - 0x1p-53);
}

LAC_CLONES static void standard_uniforms(double *restrict out, const word_piece *piece) {
  for (size_t i = 0; i < PIECE; i++) {
    out[2 * i] = uniform_of(piece->word[0][i], piece->word[1][i]);
    out[2 * i + 1] = uniform_of(piece->word[2][i], piece->word[3][i]);
  }
}

LAC_CLONES static void standard_normals(double *restrict out, const word_piece *piece) {
  for (size_t i = 0; i < PIECE; i++) {
    double radius = sqrt(-2 * lac_log_inline(uniform_of(piece->word[0][i], piece->word[1][i])));
    double sine, cosine;
    lac_sincos2pi_inline(uniform_of(piece->word[2][i], piece->word[3][i]), &sine, &cosine);
    out[2 * i] = radius * cosine;
    out[2 * i + 1] = radius * sine;
  }
}

LAC_CLONES static void shape_normal(size_t n, double *restrict out, const double *restrict z, double median, double upper, double lower) {
  for (size_t i = 0; i < n; i++) out[i] = fma(z[i], lac_choose(z[i] < 0, lower, upper), median);
}

LAC_CLONES static void shape_log_normal(size_t n, double *restrict out, const double *restrict z, double median, double deviation) {
  for (size_t i = 0; i < n; i++) out[i] = median * lac_exp_inline(z[i] * deviation);
}

/* Weighted so that bounds of opposite sign cannot overflow; rounding must not lead out of them. */
LAC_CLONES static void shape_uniform(size_t n, double *restrict out, const double *restrict u, double low, double high) {
  for (size_t i = 0; i < n; i++) out[i] = lac_clamp(fma(high, u[i], low * (1 - u[i])), low, high);
}

LAC_CLONES static void shape_log_uniform(size_t n, double *restrict out, const double *restrict u, double low, double high) {
  double width = lac_log_inline(high) - lac_log_inline(low);
  for (size_t i = 0; i < n; i++) out[i] = lac_clamp(low * lac_exp_inline(u[i] * width), low, high);
}

static void shape_samples(size_t n, double *out, const double *u, const double *samples, size_t count) {
  for (size_t i = 0; i < n; i++) {
    size_t index = (size_t)(u[i] * (double)count);
    out[i] = samples[index < count ? index : count - 1];
  }
}

static void shape(const lac_spread *spread, size_t n, double *out, const double *standard) {
  switch (spread->kind) {
  case LAC_NORMAL: shape_normal(n, out, standard, spread->a, spread->b, spread->b); return;
  case LAC_LOPSIDED: shape_normal(n, out, standard, spread->a, spread->b, spread->c); return;
  case LAC_LOG_NORMAL: shape_log_normal(n, out, standard, spread->a, spread->b); return;
  case LAC_UNIFORM: shape_uniform(n, out, standard, spread->a, spread->b); return;
  case LAC_LOG_UNIFORM: shape_log_uniform(n, out, standard, spread->a, spread->b); return;
  case LAC_SAMPLES: shape_samples(n, out, standard, spread->samples, spread->count); return;
  }
}

/* The parameters alone; the samples themselves are looked at once, by lac_spread_check. */
static int parameters_hold(const lac_spread *s) {
  int finite = isfinite(s->a) && isfinite(s->b);
  switch (s->kind) {
  case LAC_NORMAL: return finite && s->b >= 0;
  case LAC_LOPSIDED: return finite && isfinite(s->c) && s->b >= 0 && s->c >= 0;
  case LAC_UNIFORM: return finite && s->a <= s->b;
  case LAC_LOG_UNIFORM: return finite && s->a > 0 && s->a <= s->b;
  case LAC_LOG_NORMAL: return finite && s->a > 0 && s->b >= 0;
  case LAC_SAMPLES: return s->samples != NULL && s->count > 0;
  }
  return 0;
}

lac_status lac_spread_check(const lac_spread *spread) {
  if (!parameters_hold(spread)) return LAC_OUT_OF_RANGE;
  if (spread->kind == LAC_SAMPLES)
    for (size_t i = 0; i < spread->count; i++)
      if (!isfinite(spread->samples[i])) return LAC_OUT_OF_RANGE;
  return LAC_OK;
}

void lac_draws(const lac_spread *spread, uint64_t first, size_t n, double *out) {
  if (!parameters_hold(spread)) {
    for (size_t i = 0; i < n; i++) out[i] = (double)NAN;
    return;
  }
  int normal = spread->kind == LAC_NORMAL || spread->kind == LAC_LOPSIDED || spread->kind == LAC_LOG_NORMAL;
  word_piece words;
  double standard[2 * PIECE];
  size_t skip = first & 1; /* an odd first draw is the second of its counter */
  uint64_t counter = first >> 1;
  for (size_t done = 0; done < n; counter += PIECE, skip = 0) {
    size_t count = 2 * PIECE - skip < n - done ? 2 * PIECE - skip : n - done;
    draw_words(&words, spread->key, counter);
    if (normal) standard_normals(standard, &words);
    else standard_uniforms(standard, &words);
    shape(spread, count, out + done, standard + skip);
    done += count;
  }
}

/* Doubles in order as whole numbers in order. */
static uint64_t rank_of(double x) {
  uint64_t bits = lac_bits(x);
  return bits >> 63 ? ~bits : bits | (UINT64_C(1) << 63);
}

/* The sample with so many below it, found by halving the range of all doubles: no copy to sort, the samples are the caller's. */
static double sample_of_order(const double *samples, size_t count, size_t order) {
  uint64_t low = 0, high = UINT64_MAX;
  while (low < high) {
    uint64_t middle = low + (high - low) / 2;
    size_t up_to = 0;
    for (size_t i = 0; i < count; i++) up_to += rank_of(samples[i]) <= middle;
    if (up_to > order) high = middle;
    else low = middle + 1;
  }
  return lac_from_bits(low >> 63 ? low & ~(UINT64_C(1) << 63) : ~low);
}

double lac_spread_median(const lac_spread *spread) {
  if (lac_spread_check(spread) != LAC_OK) return (double)NAN;
  double a = spread->a, b = spread->b;
  switch (spread->kind) {
  case LAC_UNIFORM: return a / 2 + b / 2;
  case LAC_LOG_UNIFORM: return isfinite(b / a) ? a * sqrt(b / a) : sqrt(a) * sqrt(b);
  case LAC_SAMPLES:
    return sample_of_order(spread->samples, spread->count, (spread->count - 1) / 2) / 2 +
           sample_of_order(spread->samples, spread->count, spread->count / 2) / 2;
  default: return a;
  }
}

/* FNV-1a (Fowler, Noll & Vo 1991), 64 bits. */
static uint64_t hash_text(uint64_t hash, const char *text) {
  for (; *text; text++) hash = (hash ^ (unsigned char)*text) * UINT64_C(0x100000001b3);
  return hash;
}

/* Between target and name stands a byte that neither has, so that no two pairs run together; the generator itself does the mixing. */
uint64_t lac_draws_key(uint64_t seed, const char *target, const char *name) {
  uint64_t hash = hash_text(UINT64_C(0xcbf29ce484222325), target ? target : "");
  hash = hash_text(hash * UINT64_C(0x100000001b3), name);
  const uint32_t counter[4] = {(uint32_t)hash, (uint32_t)(hash >> 32), (uint32_t)seed, (uint32_t)(seed >> 32)}, key[2] = {0, 0};
  uint32_t word[4];
  lac_philox(counter, key, word);
  return word[0] | ((uint64_t)word[1] << 32);
}
