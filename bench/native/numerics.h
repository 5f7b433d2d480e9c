/* Pure mathematics of the inner loops, as in src/numerics: exponential by table, angles in turns, errors of squares. */
#ifndef NUMERICS_H
#define NUMERICS_H
#include <math.h>

#define PI 3.14159265358979323846

/* exp(-x) = table[k] exp(r + low[k]), k = round(16 x), r = k/16 - x. */
#define EXPONENTIAL_STEPS 16
#define EXPONENTIAL_OFFSET 672
#define EXPONENTIAL_SIZE 1665
static double exponential_table[EXPONENTIAL_SIZE];
static double exponential_low[EXPONENTIAL_SIZE];

/* Directions of 64 parts of a turn. */
#define DIRECTIONS 64
static double cosines[DIRECTIONS + 1];
static double sines[DIRECTIONS + 1];

static void fill_numerics(void) {
  const double e42 = 1.739274941520501e18, e42_low = 55.394681303611236;
  const double ratio = 0.9394130628134758, ratio_low = -2.152447043447057e-17;
  const double split = 134217729;
  const double ratio_high = split * ratio - (split * ratio - ratio);
  const double ratio_rest = ratio - ratio_high;
  double value = e42, rest = e42_low;
  for (int k = 0; k < EXPONENTIAL_SIZE; k++) {
    exponential_table[k] = value;
    exponential_low[k] = rest / value;
    const double high = split * value - (split * value - value);
    const double low = value - high;
    const double product = value * ratio;
    const double lost = high * ratio_high - product + high * ratio_rest + low * ratio_high + low * ratio_rest;
    const double small = lost + (value * ratio_low + rest * ratio);
    value = product + small;
    rest = product - value + small;
  }
  for (int k = 0; k <= DIRECTIONS; k++) {
    const double angle = (k - DIRECTIONS / 2) * PI / (DIRECTIONS / 2);
    cosines[k] = k % 32 == 16 ? 0 : cos(angle);
    sines[k] = k % 32 == 0 ? 0 : sin(angle);
  }
}

/* cos and sin of 2 pi turn, |turn| <= 1/2. */
static inline void cosine_and_sine(double turn, double *cosine, double *sine) {
  const int k = (int)(turn * DIRECTIONS + (DIRECTIONS / 2 + 0.5));
  const double r = (turn - (double)(k - DIRECTIONS / 2) / DIRECTIONS) * (2 * PI);
  const double r2 = r * r;
  const double s = r * (1 - r2 * (1.0 / 6 - r2 * (1.0 / 120 - r2 / 5040)));
  const double versine = r2 * (0.5 - r2 * (1.0 / 24 - r2 * (1.0 / 720 - r2 / 40320)));
  *cosine = cosines[k] - (cosines[k] * versine + sines[k] * s);
  *sine = sines[k] + (cosines[k] * s - sines[k] * versine);
}

/* a*a - fl(a*a). */
static inline double square_error(double a) {
  const double scaled = 134217729 * a;
  const double high = scaled - (scaled - a);
  const double low = a - high;
  return high * high - a * a + 2 * high * low + low * low;
}

static inline double horner(const double *coefficients, int count, double x) {
  double sum = coefficients[count - 1];
  for (int n = count - 2; n >= 0; n--) sum = sum * x + coefficients[n];
  return sum;
}

#endif
