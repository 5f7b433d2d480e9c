/* Electrons and positrons at a given net density, second order: src/fermi-gas line by line, without its third order. */
#ifndef FERMI_GAS_H
#define FERMI_GAS_H
#include <stdlib.h>
#include "numerics.h"
#include "tables.h"

/* The record of src/fermi-gas/record.ts. */
struct gas {
  double net_density, theta, fermi_momentum, eta, nu, kinetic_mu, centre, psi, lambda;
  double n00, p00, q, n10, n01, m12, n20, n11, n02;
  double antiparticles, step, contour, cut;
};

/* Sums over nodes and residues, before they become derivatives. */
struct sums {
  double m00, m10, m11, m12, m20, m21, m22, pressure, q;
};

/* ---- Nodes: one row per step of the ladder 2^(k/8), momentum and rapidity. ---- */

#define LOWEST (-240)
#define RUNGS 377
#define MOMENTUM_CAPACITY 96
#define RAPIDITY_CAPACITY 256

struct node {
  double energy, energy_low, number, pressure;
};

static double steps[RUNGS];
static double vacuum_terms[RUNGS];
static struct node *momentum_rows[RUNGS];
static struct node *rapidity_rows[RUNGS];

static void fill_steps(void) {
  for (int i = 0; i < RUNGS; i++) {
    const double exponent = (i + LOWEST) / 8.0;
    const double whole = floor(exponent);
    steps[i] = floor(exp2(exponent - whole) * 524288 + 0.5) / 524288 * exp2(whole);
  }
}

/* Error of the rule in the pressure of the sea, for a step. */
static double vacuum_term(double h) {
  const double decay = 2 * PI / h;
  double sum = 0;
  for (int i = 0;; i++) {
    const double t = cosh(i / 64.0);
    if (decay * t >= decay + 45 || decay * t > 740) break;
    sum += (i == 0 ? 0.5 : 1) * t * t * t * t / expm1(decay * t);
  }
  return (2.0 / 3) * sum / 64;
}

static struct node *build_momentum_row(int rung) {
  const double h = steps[rung];
  struct node *row = malloc(sizeof(struct node) * (MOMENTUM_CAPACITY + 1));
  for (int j = 0; j < MOMENTUM_CAPACITY; j++) {
    const double p = (j + 1) * h;
    const double p2 = p * p;
    const double total = sqrt(1 + p2);
    const double energy = p2 / (1 + total);
    const double energy2 = energy * energy;
    const double rest = energy < 2 ? p2 - 2 * energy - energy2 : p2 - energy2 - 2 * energy;
    row[j].energy = energy;
    row[j].energy_low = (rest - square_error(energy)) / (2 * total);
    row[j].number = p2;
    row[j].pressure = p2 * p2 / (3 * total);
  }
  row[MOMENTUM_CAPACITY].energy = INFINITY;
  vacuum_terms[rung] = vacuum_term(h);
  return momentum_rows[rung] = row;
}

static struct node *build_rapidity_row(int rung) {
  const double h = steps[rung];
  struct node *row = malloc(sizeof(struct node) * (RAPIDITY_CAPACITY + 1));
  for (int j = 0; j < RAPIDITY_CAPACITY; j++) {
    const double u = (j + 1) * h;
    const double half = sinh(0.5 * u);
    const double energy = 2 * half * half;
    const double p = sinh(u);
    row[j].energy = energy;
    row[j].energy_low = 0;
    row[j].number = p * p * (1 + energy);
    row[j].pressure = p * p * p * p / 3;
  }
  row[RAPIDITY_CAPACITY].energy = INFINITY;
  return rapidity_rows[rung] = row;
}

static inline const struct node *momentum_row(int rung) {
  return momentum_rows[rung] ? momentum_rows[rung] : build_momentum_row(rung);
}

static inline const struct node *rapidity_row(int rung) {
  return rapidity_rows[rung] ? rapidity_rows[rung] : build_rapidity_row(rung);
}

/* Rounds a step down to the ladder. */
static inline int choose_rung(struct gas *gas, double largest) {
  int rung = (int)floor(8 * log2(largest)) - LOWEST;
  if (rung < 0) rung = 0;
  if (rung > RUNGS - 1) rung = RUNGS - 1;
  gas->step = steps[rung];
  return rung;
}

/* The rapidity step of a classical gas (poles < 0) or of one with poles. */
static int choose_rapidity_step(struct gas *gas, double eta, int poles) {
  const double theta = gas->theta;
  const double kinetic = eta * theta;
  double y = CLEAR_HEIGHT;
  if (poles >= 0 && kinetic > -1) {
    const double frequency = PI * theta * (2 * poles + 1);
    const double re = kinetic * (kinetic + 2) - frequency * frequency;
    const double im = 2 * (1 + kinetic) * frequency;
    const double modulus = sqrt(re * re + im * im);
    const double larger = sqrt(0.5 * (modulus + fabs(re)));
    const double smaller = 0.5 * im / larger;
    const double p_re = re > 0 ? larger : smaller;
    const double p_im = re > 0 ? smaller : larger;
    const double height = atan2(frequency + p_im, 1 + kinetic + p_re);
    if (height < y) y = height;
  }
  const double gaussian = sqrt(GAUSSIAN_HEIGHT * theta);
  if (y > gaussian) y = gaussian;
  double growth = (1 - cos(y)) / theta;
  const double bound = eta < 0 ? 1 - eta : 1;
  if (growth > bound) growth = bound;
  return choose_rung(gas, 2 * PI * y / (RAPIDITY_DIGITS + growth));
}

/* ---- Start value (start-value.ts, start-coordinates.ts). ---- */

enum regime { TRAPEZOID, DEGENERATE, CLASSICAL };

static void degenerate_start(struct gas *gas) {
  const double z2 = 1.6449340668482264, z4 = 1.8940656589944918, z6 = 1.9710218259105;
  const double energy = gas->kinetic_mu;
  const double theta2 = gas->theta * gas->theta;
  const double x2 = energy * (energy + 2);
  const double guess = energy - z2 * theta2 * (2 * x2 + 1) / (x2 * (1 + energy));
  const double p2 = guess * (guess + 2);
  const double total = 1 + guess;
  const double p = sqrt(p2);
  const double inverse = 1 / p2;
  const double r = theta2 * inverse;
  const double density =
      p2 * p / 3 + r * p * (z2 * (2 * p2 + 1) + 3 * r * inverse * (z4 + z6 * 5 * (6 * p2 + 7) * r * inverse));
  const double slope = p * (total + z2 * r * inverse * total * (2 * p2 - 1));
  gas->kinetic_mu = guess - (density - gas->net_density) / slope;
}

static double classical_density(double theta) {
  const double x = 2 * theta / (theta + DENSITY_SCALE) - 1;
  const double sum = horner(densityCoefficients, sizeof densityCoefficients / sizeof(double), x);
  const double y = theta * (1 + ALPHA * theta);
  return NORM * y * sqrt(y) * exp(sum);
}

static double table_correction(double t, double u) {
  const int i = t < 0.25 ? 0 : t < 0.5 ? 1 : t < 0.75 ? 2 : t < 0.92 ? 3 : 4;
  const int j = u < 0.3 ? 0 : u < 0.62 ? 1 : 2;
  const double y = (2 * t - PATCHES_T[i] - PATCHES_T[i + 1]) / (PATCHES_T[i + 1] - PATCHES_T[i]);
  const double x = (2 * u - PATCHES_U[j] - PATCHES_U[j + 1]) / (PATCHES_U[j + 1] - PATCHES_U[j]);
  const double x2 = x * x;
  const double *c = tableCoefficients + (i * 3 + j) * PATCH_SIZE * PATCH_SIZE + PATCH_SIZE * (PATCH_SIZE - 1);
  double sum = 0;
  for (int k = 0; k < PATCH_SIZE; k++, c -= PATCH_SIZE) {
    const double even = (((c[8] * x2 + c[6]) * x2 + c[4]) * x2 + c[2]) * x2 + c[0];
    const double odd = (((c[9] * x2 + c[7]) * x2 + c[5]) * x2 + c[3]) * x2 + c[1];
    sum = sum * y + (even + odd * x);
  }
  return sum;
}

static enum regime start_value(struct gas *gas) {
  const double theta = gas->theta;
  if (gas->kinetic_mu > DEGENERATE_START * theta) {
    degenerate_start(gas);
    return DEGENERATE;
  }
  const double inverse = 1 / theta;
  const double classical = classical_density(theta);
  const double b = gas->net_density / classical;
  const double threshold = exp(-inverse);
  const double x = sqrt(b * b + 4 * threshold * threshold);
  if (x < CLASSICAL_LIMIT) return CLASSICAL;
  const double lowest = BRANCH_POINT + 2 * threshold;
  const double energy = LAST_RATIO * theta;
  const double p2 = energy * (energy + 2);
  const double highest = BRANCH_POINT + p2 * sqrt(p2) / (3 * classical);
  double u = log((BRANCH_POINT + x) / lowest) / log(highest / lowest);
  if (u > 1) u = 1;
  const double t = theta / (theta + SCALE_THETA / (1 + SCALE_U * u)) * STRETCH;
  const double correction = table_correction(t, u) * b / x;
  if (b < 4 * threshold) {
    gas->nu = asinh(0.5 * b / threshold) + correction;
    gas->eta = gas->nu - inverse;
  } else {
    gas->eta = log(0.5 * (b + x)) + correction;
    gas->nu = gas->eta + inverse;
  }
  return TRAPEZOID;
}

/* ---- Classical gas (boltzmann.ts). ---- */

static void boltzmann(struct gas *gas) {
  const double theta = gas->theta;
  const double n = gas->net_density;
  const double inverse = 1 / theta;
  const struct node *row = rapidity_row(choose_rapidity_step(gas, -INFINITY, -1));
  double b0 = 0, b1 = 0, b2 = 0;
  for (;; row++) {
    const double x = row->energy * inverse;
    if (!(x < CUT_CLASSICAL)) break;
    const int k = (int)(x * EXPONENTIAL_STEPS + (EXPONENTIAL_OFFSET + 0.5));
    const double r = (k - EXPONENTIAL_OFFSET) * (1.0 / EXPONENTIAL_STEPS) - x;
    const double r2 = r * r;
    const double polynomial =
        1 + r + r2 * (0.5 + r * (1.0 / 6)) + r2 * r2 * (1.0 / 24 + r * (1.0 / 120) + r2 * (1.0 / 720 + r * (1.0 / 5040)));
    const double term0 = row->number * exponential_table[k] * polynomial;
    const double term1 = term0 * x;
    b0 += term0;
    b1 += term1;
    b2 += term1 * x;
  }
  b1 /= b0;
  b2 /= b0;
  b0 *= gas->step;
  const double half = 0.5 * n / b0;
  const double logarithm = log(2 * half) + inverse;
  const int far_apart = logarithm > 20;
  double nu = logarithm, rare;
  if (far_apart) {
    rare = b0 * exp(-nu - inverse);
  } else {
    const double threshold = exp(-inverse);
    nu = n == 0 ? 0 : asinh(half / threshold);
    rare = b0 * threshold * exp(-nu);
  }
  const int symmetric = nu < 1;
  const double psi = symmetric ? nu : far_apart ? log(2 * half) : nu - inverse;
  const double many = n + rare, total = many + rare;
  const double shift = symmetric ? inverse : 0, shift_b = symmetric ? inverse : 2 * inverse;
  const double y1 = b1 + shift, y2 = b2 + shift * (2 * b1 + shift);
  const double yb1 = b1 + shift_b, yb2 = b2 + shift_b * (2 * b1 + shift_b);
  const double odd_first = symmetric ? n * y1 : many * y1 - rare * yb1;
  const double even_first = many * y1 + rare * yb1;
  const double odd_second = symmetric ? n * y2 : many * y2 - rare * yb2;
  gas->centre = symmetric ? -1 : 0;
  gas->psi = psi;
  gas->lambda = 1;
  gas->nu = nu;
  gas->eta = symmetric ? nu - inverse : psi;
  gas->antiparticles = rare;
  gas->n00 = n;
  gas->p00 = theta * total;
  gas->q = theta * (total + even_first);
  gas->n10 = total;
  gas->n20 = n;
  gas->n01 = odd_first;
  gas->m12 = many * y2 + rare * yb2;
  gas->n11 = even_first;
  gas->n02 = odd_second - 2 * odd_first;
}

/* ---- Degenerate gas (cold.ts, sommerfeld.ts). ---- */

#define BINOMIAL_TERMS 14
#define ENTIRE_TERMS 15
static double binomial_series[BINOMIAL_TERMS];
static double entire_series[ENTIRE_TERMS];
static double sommerfeld_coefficients[SOMMERFELD_TERMS];

static void fill_series(void) {
  static const double zeta_even[] = {
      1.6449340668482264, 1.0823232337111382, 1.0173430619844491, 1.0040773561979443,
      1.0009945751278181, 1.0002460865533081, 1.000061248135059,  1.0000152822594086,
      1.0000038172932648, 1.0000009539620338, 1.0000002384505027, 1.0000000596081891,
  };
  double coefficient = 1, factorial = 120;
  for (int k = 0; k < BINOMIAL_TERMS; k++) {
    binomial_series[k] = coefficient / (3 * (2 * k + 5));
    coefficient *= -(k + 0.5) / (k + 1);
  }
  for (int k = 0; k < ENTIRE_TERMS; k++) {
    const int m = 2 * k + 5;
    entire_series[k] = (exp2(2 * m) / 32 - exp2(m) / 4) / (3 * factorial);
    factorial *= (double)(m + 1) * (m + 2);
  }
  for (int k = 1; k < SOMMERFELD_TERMS; k++) {
    const double zeta = k <= 12 ? zeta_even[k - 1] : 1 + exp2(-2 * k) + pow(3, -2 * k);
    sommerfeld_coefficients[k] = 2 * (1 - exp2(1 - 2 * k)) * zeta;
  }
}

static double cold_pressure(double energy) {
  const double x2 = energy * (energy + 2);
  const double x = sqrt(x2);
  if (x2 < 0.03) return horner(binomial_series, x2 < 1e-5 ? 4 : x2 < 1e-3 ? 7 : BINOMIAL_TERMS, x2) * x2 * x2 * x;
  const double rapidity = log1p(energy + x);
  if (x2 < 1) {
    const double square = rapidity * rapidity;
    return horner(entire_series, x2 < 0.2 ? 11 : ENTIRE_TERMS, square) * square * square * rapidity;
  }
  return (x * (1 + energy) * (2 * x2 - 3) + 3 * rapidity) / 24;
}

static void sommerfeld(struct gas *gas) {
  const double theta = gas->theta, kinetic = gas->kinetic_mu;
  const double p2 = kinetic * (kinetic + 2);
  const double states = p2 * sqrt(p2) / 3;
  const double part = theta / p2;
  const double x = 2 * (1 + kinetic) * part;
  const double s = theta * part;
  double a = 1.5 * x, b = 0.5 * x * a + 3 * s, c = -0.5 * x * b + 4 * s * a;
  double n00 = 1, n10 = a, n20 = b, n01 = 0, n11 = 0, n02 = 0, pressure = 0, q = 0, m12 = 0;
  for (int k = 1; k < SOMMERFELD_TERMS; k++) {
    const double i = 2 * k, ii = i * (i - 1);
    const double coefficient = sommerfeld_coefficients[k];
    const double d = x * (0.5 - i) * c + s * (3 - i) * (i + 1) * b;
    const double ta = coefficient * a, tb = coefficient * b, tc = coefficient * c;
    pressure += ta;
    q += i * ta;
    m12 += ii * ta;
    n00 += tb;
    n01 += i * tb;
    n02 += ii * tb;
    n10 += tc;
    n11 += i * tc;
    n20 += coefficient * d;
    const double e = x * (-0.5 - i) * d + s * (2 - i) * (i + 2) * c;
    if (fabs(tc) * i * i <= SERIES_END * fabs(n10) && fabs(ta) * i * i * i <= SERIES_END * fabs(m12)) break;
    a = c;
    b = d;
    c = e;
  }
  const double energy = states * theta;
  gas->centre = kinetic;
  gas->psi = 0;
  gas->lambda = 0;
  gas->antiparticles = -1;
  gas->n00 = states * n00;
  gas->p00 = cold_pressure(kinetic) + energy * pressure;
  gas->q = energy * q;
  gas->m12 = states * m12;
  gas->n10 = states * n10;
  gas->n01 = states * n01;
  gas->n20 = states * n20;
  gas->n11 = states * n11;
  gas->n02 = states * n02;
}

/* ---- Trapezoidal rule (trapezoid.ts, node-sums.ts, pole-residues.ts). ---- */

static double node_y[MOMENTUM_CAPACITY];
static double node_factor[MOMENTUM_CAPACITY];

/* y and A = e^(psi - y) of every node below the cut; returns their number. */
static int fill_factors(const struct gas *gas, const struct node *row, int shifted) {
  const double theta = gas->theta, inverse = 1 / theta, cut = gas->cut;
  const double shift = shifted ? inverse : 0;
  const double origin = shifted ? 0 : gas->centre;
  const double scale = exp(gas->psi - shift);
  const double unit = theta * (1.0 / EXPONENTIAL_STEPS);
  const double split = unit * 8193;
  const double unit_high = split - (split - unit);
  const double unit_low = unit - unit_high;
  for (int count = 0;; count++) {
    const double energy = row[count].energy - origin;
    const double low = row[count].energy_low;
    const double x = (energy + low) * inverse;
    const double y = x + shift;
    if (!(y < cut)) return count;
    const int k = (int)(x * EXPONENTIAL_STEPS + (EXPONENTIAL_OFFSET + 0.5));
    const int m = k - EXPONENTIAL_OFFSET;
    const double r = (m * unit_high - energy + (m * unit_low - low)) * inverse + exponential_low[k];
    const double r2 = r * r;
    const double polynomial =
        1 + (r + (r2 * (0.5 + r * (1.0 / 6)) +
                  r2 * r2 * (1.0 / 24 + r * (1.0 / 120) + r2 * (1.0 / 720 + r * (1.0 / 5040)))));
    node_y[count] = y;
    node_factor[count] = scale * exponential_table[k] * polynomial;
  }
}

static void scale_sums(struct sums *sums, double h) {
  sums->m00 *= h;
  sums->m10 *= h;
  sums->m11 *= h;
  sums->m12 *= h;
  sums->m20 *= h;
  sums->m21 *= h;
  sums->m22 *= h;
  sums->pressure *= h;
  sums->q *= h;
}

static void sum_particles(struct sums *sums, const struct node *row, int count) {
  double m00 = 0, m10 = 0, m11 = 0, m12 = 0, m20 = 0, m21 = 0, m22 = 0, pressure = 0, q = 0;
  for (int i = 0; i < count; i++) {
    const double y = node_y[i], a = node_factor[i];
    const double number = row[i].number, weight = row[i].pressure;
    const double empty = 1 / (1 + a);
    const double f = a * empty, g = f * empty;
    const double pg = number * g, pt = pg * (empty - f);
    const double pgy = pg * y, pty = pt * y;
    m00 += number * f;
    m10 += pg;
    m11 += pgy;
    m12 += pgy * y;
    m20 += pt;
    m21 += pty;
    m22 += pty * y;
    pressure += weight * f;
    q += weight * g * y;
  }
  *sums = (struct sums){m00, m10, m11, m12, m20, m21, m22, pressure, q};
}

static void sum_pairs(const struct gas *gas, struct sums *sums, const struct node *row, int count) {
  const double ratio = exp(-2 * gas->nu), deficit = -expm1(-2 * gas->nu);
  const double c = 2 * (1 + gas->centre) / gas->theta;
  double m00 = 0, m10 = 0, m11 = 0, m12 = 0, m20 = 0, m21 = 0, m22 = 0, pressure = 0, q = 0;
  for (int i = 0; i < count; i++) {
    const double y = node_y[i], a = node_factor[i];
    const double number = row[i].number, weight = row[i].pressure;
    const double b = a * ratio;
    const double both = 1 / ((1 + a) * (1 + b));
    const double empty = (1 + b) * both, empty_b = (1 + a) * both;
    const double f = a * empty, f_b = b * empty_b;
    const double g = f * empty, g_b = f_b * empty_b;
    const double difference = a * deficit * both;
    const double g_sum = g + g_b, g_difference = difference * (empty - f_b);
    const double slope = empty - f;
    const double t_difference = g_difference * slope - 2 * g_b * difference;
    const double t_b = g_b * (empty_b - f_b), t_sum = g * slope + t_b;
    const double yc = c * (2 * y + c);
    const double g_sum_y = g_sum * y, g_b_c = g_b * c;
    m00 += number * difference;
    m10 += number * g_sum;
    m11 += number * (g_difference * y - g_b_c);
    m12 += number * (g_sum_y * y + g_b * yc);
    m20 += number * t_difference;
    m21 += number * (t_sum * y + t_b * c);
    m22 += number * (t_difference * y * y - t_b * yc);
    pressure += weight * (f + f_b);
    q += weight * (g_sum_y + g_b_c);
  }
  *sums = (struct sums){m00, m10, m11, m12, m20, m21, m22, pressure, q};
}

/* Complex numbers as pairs: products and sums written by functions that every compiler inlines. */
struct complex {
  double re, im;
};
static inline struct complex times(struct complex a, struct complex b) {
  return (struct complex){a.re * b.re - a.im * b.im, a.re * b.im + a.im * b.re};
}
static inline struct complex plus(struct complex a, struct complex b) {
  return (struct complex){a.re + b.re, a.im + b.im};
}
static inline struct complex scaled(double s, struct complex a) { return (struct complex){s * a.re, s * a.im}; }

/* Residues of the first poles, nodes equally spaced in momentum. */
static void add_pole_residues(const struct gas *gas, struct sums *sums, int count) {
  const double theta = gas->theta, psi = gas->psi, h = gas->step;
  const double inverse_step = 1 / h, kappa = 2 * PI * inverse_step, weight = -4 * PI * theta;
  const double contour = gas->contour * CONTOUR_MARGIN;
  const double kinetic = gas->eta * theta;
  const double e_re = gas->nu < 1 ? gas->nu * theta : 1 + kinetic;
  const double kinetic2 = kinetic * kinetic;
  const double larger = fabs(2 * kinetic) > kinetic2 ? 2 * kinetic : kinetic2;
  const double smaller = fabs(2 * kinetic) > kinetic2 ? kinetic2 : 2 * kinetic;
  const double fermi2 = kinetic2 + 2 * kinetic;
  const double fermi2_low = larger - fermi2 + smaller + square_error(kinetic);

  for (int k = 0; k < count; k++) {
    const double omega = PI * (2 * k + 1);
    const struct complex e = {e_re, omega * theta};
    const double e_im2 = e.im * e.im;
    const struct complex p2 = {fermi2 - e_im2, 2 * e.re * e.im};
    const double modulus = sqrt(p2.re * p2.re + p2.im * p2.im);
    const double inverse_modulus = 1 / modulus;
    struct complex p;
    if (p2.re > 0) {
      p.re = sqrt(0.5 * (modulus + p2.re));
      p.im = 0.5 * p2.im / p.re;
    } else {
      p.im = sqrt(0.5 * (modulus - p2.re));
      p.re = 0.5 * p2.im / p.im;
    }
    const double re2 = p.re * p.re, im2 = p.im * p.im;
    const double p2_low = fermi2 - p2.re - e_im2 + fermi2_low;
    const double residual = p2.re - re2 + im2 - square_error(p.re) + square_error(p.im) + p2_low;
    const double correction = 0.5 * inverse_modulus * residual;
    const double height = p.im - correction * p.im;
    if (height > contour) break;
    const double turns = floor(p.re * inverse_step + 0.5);
    struct complex v;
    cosine_and_sine((p.re - turns * h + correction * p.re) * inverse_step, &v.re, &v.im);
    v = scaled(exp(-kappa * height), v);
    const double rest = 1 - v.re;
    const double q_scale = 1 / (rest * rest + v.im * v.im);
    const struct complex q = {(v.re * rest - v.im * v.im) * q_scale, v.im * q_scale};

    const struct complex ip = {p.re * inverse_modulus, -p.im * inverse_modulus};
    const struct complex e_over_p = times(e, ip);
    const struct complex b = times(e_over_p, ip);
    const double energy_scale = 1 / (e.re * e.re + e_im2);
    const struct complex a = {e.re * energy_scale, -e.im * energy_scale};
    const struct complex rate = {-kappa * e_over_p.im, kappa * e_over_p.re};
    const struct complex rq = times(rate, q);
    const struct complex g = plus(rate, rq);
    const struct complex l = scaled(theta, plus(plus(a, b), g));
    const struct complex ip2 = times(b, a), ip4 = times(ip2, ip2);
    const struct complex r = times(ip2, a);
    const struct complex x = {rq.re - r.re, rq.im - r.im};
    const struct complex e2 = {2 + p2.re, p2.im};
    const struct complex a2 = times(a, a), e2ip4 = times(e2, ip4), gx = times(g, x);
    const double theta2 = theta * theta;
    const struct complex dl = {theta2 * (-a2.re - e2ip4.re + gx.re), theta2 * (-a2.im - e2ip4.im + gx.im)};
    const struct complex hh = times(times(e, p), q);
    const struct complex h1 = times(hh, l);
    const struct complex h2 = times(hh, plus(times(l, l), dl));
    const struct complex f = times(hh, scaled(1.0 / 3, times(p2, a)));
    const struct complex m = scaled(theta, plus(scaled(3, b), g));
    const struct complex f1 = times(f, m);
    const struct complex y2 = {psi * psi - omega * omega, 2 * psi * omega};
    const double hy = hh.re * omega + hh.im * psi, h1y = h1.re * omega + h1.im * psi;
    sums->pressure += weight * f.im;
    sums->q += weight * (f1.re * omega + f1.im * psi + f.im);
    sums->m00 += weight * hh.im;
    sums->m10 += weight * h1.im;
    sums->m20 += weight * h2.im;
    sums->m11 += weight * (h1y + hh.im);
    sums->m21 += weight * (h2.re * omega + h2.im * psi + 2 * h1.im);
    sums->m12 += weight * (h1.re * y2.im + h1.im * y2.re + 2 * hy);
    sums->m22 += weight * (h2.re * y2.im + h2.im * y2.re + 4 * h1y + 2 * hh.im);
  }
}

static int pole_count(double eta, double theta, int pairs) {
  if (!pairs) return eta < -4 ? 0 : eta < 1 ? 1 : eta < 5 ? 2 : eta < 14 ? 3 : 4;
  if (theta < 0.035) return eta < -9 ? 0 : eta < -5 ? 1 : 3;
  if (theta < 0.1) return eta > 10 ? 4 : 3;
  return eta < 14 ? 4 : 5;
}

static int choose_step(struct gas *gas, int poles) {
  const double theta = gas->theta, eta = gas->eta;
  const double kinetic = eta * theta;
  const double frequency = PI * theta * (2 * poles + 1);
  const double re = kinetic * (kinetic + 2) - frequency * frequency;
  const double im = 2 * (1 + kinetic) * frequency;
  const double modulus = sqrt(re * re + im * im);
  double y = re > 0 ? im / sqrt(2 * (modulus + re)) : sqrt(0.5 * (modulus - re));
  const double gaussian = sqrt(GAUSSIAN_HEIGHT * theta);
  if (gaussian < 1 && y > gaussian) y = gaussian;
  double growth = (y < 1 ? 1 - sqrt(1 - y * y) : 1) / theta;
  const double bound = eta < 0 ? 1 - eta : 1;
  if (growth > bound) growth = bound;
  if (y >= 1 && theta < 1 && eta < 0) growth += 1 - 3 * log(theta);
  gas->contour = y;
  return choose_rung(gas, 2 * PI * y / (DIGITS + growth + (theta > 0.1 ? poles : 0)));
}

static void trapezoid(struct gas *gas) {
  const double eta = gas->eta, nu = gas->nu, theta = gas->theta;
  const int pairs = nu < PAIRS_NU || (nu < PAIRS_NU_HOT && theta > PAIRS_THETA);
  const int poles = pole_count(eta, theta, pairs);
  const int degenerate = eta > 0;
  const int symmetric = !degenerate && nu < 1;
  gas->centre = degenerate ? eta * theta : symmetric ? -1 : 0;
  gas->psi = degenerate ? 0 : symmetric ? nu : eta;
  gas->lambda = degenerate ? 0 : 1;
  gas->cut = CUT_SECOND + (symmetric ? 1 / theta : 0);
  const int rung = choose_step(gas, poles);
  const struct node *row = momentum_row(rung);
  const int count = fill_factors(gas, row, symmetric);
  struct sums sums;
  if (pairs) sum_pairs(gas, &sums, row, count);
  else sum_particles(&sums, row, count);
  scale_sums(&sums, gas->step);
  sums.pressure -= vacuum_terms[rung];
  if (poles > 0) add_pole_residues(gas, &sums, poles);
  gas->n00 = sums.m00;
  gas->p00 = sums.pressure;
  gas->q = sums.q;
  gas->n10 = sums.m10;
  gas->n01 = sums.m11;
  gas->m12 = sums.m12;
  gas->n20 = sums.m20;
  gas->n11 = degenerate ? sums.m21 - sums.m10 : sums.m21;
  gas->n02 = sums.m22 - 2 * sums.m11;
  gas->antiparticles = -1;
}

/* ---- Net density (net-density.ts): one sweep and a Taylor step. ---- */

static void solve_density(struct gas *gas) {
  const enum regime regime = start_value(gas);
  if (regime == CLASSICAL) {
    boltzmann(gas);
    return;
  }
  const int degenerate = regime == DEGENERATE;
  const double theta = gas->theta;
  for (int sweeps = 0; sweeps < MOST_SWEEPS; sweeps++) {
    if (degenerate) {
      gas->eta = gas->kinetic_mu / theta;
      gas->nu = (1 + gas->kinetic_mu) / theta;
    }
    if (gas->eta > SOMMERFELD_ETA) {
      if (!degenerate) gas->kinetic_mu = gas->eta * theta;
      sommerfeld(gas);
    } else {
      trapezoid(gas);
    }
    const double inverse = 1 / gas->n10;
    const double first = (gas->net_density - gas->n00) * inverse;
    const double d = first / (1 + 0.5 * first * gas->n20 * inverse);
    const double unit = degenerate ? gas->eta : gas->nu < 1 ? gas->nu : gas->eta > 1 ? gas->eta : 1;
    if (fabs(d) <= TAYLOR_RADIUS * unit) {
      const double lambda = gas->lambda, n = gas->n00, n10 = gas->n10, n01 = gas->n01;
      gas->p00 += theta * d * (n + 0.5 * d * (n10 + d * gas->n20 / 3));
      gas->q += theta * (d * (lambda * n + n01) + 0.5 * d * d * (lambda * n10 + gas->n11));
      gas->m12 += d * (gas->n02 + 2 * lambda * n01);
      gas->n10 = n10 + d * gas->n20;
      gas->n01 = n01 + d * gas->n11;
      gas->n00 = gas->net_density;
      if (lambda == 1) gas->psi += d;
      else gas->centre += theta * d;
      return;
    }
    /* Not entered on any point of the bench. */
    if (degenerate) gas->kinetic_mu += theta * d;
    else if (gas->nu < 0.5 / theta) {
      gas->nu += d;
      gas->eta = gas->nu - 1 / theta;
    } else {
      gas->eta += d;
      gas->nu = gas->eta + 1 / theta;
    }
  }
  abort();
}

/* Density of positrons where the method did not give it (single-species.ts). */
static void find_antiparticles(struct gas *gas) {
  if (gas->antiparticles >= 0) return;
  const double theta = gas->theta, inverse = 1 / theta;
  const double nu = gas->centre == -1 ? gas->psi : gas->psi + (1 + gas->centre) / theta;
  const double eta = -nu - inverse;
  gas->antiparticles = 0;
  if (eta < -740) return;
  struct gas positrons = {.theta = theta};
  const struct node *row = rapidity_row(choose_rapidity_step(&positrons, eta, eta < -3 ? -1 : 0));
  const double scale = exp(eta);
  double sum = 0;
  for (;; row++) {
    const double x = row->energy * inverse;
    if (!(x < CUT_DENSITY)) break;
    const double a = scale * exp(-x);
    sum += row->number * a / (1 + a);
  }
  gas->antiparticles = sum * positrons.step;
}

#endif
