/* The Coulomb plasma with its default options, second order: src/coulomb term by term. T > 0 only. */
#ifndef COULOMB_H
#define COULOMB_H
#include "numerics.h"
#include "tables.h"

/* Natural derivatives f_00 f_10 f_01 f_20 f_11 f_02; u[5] of a function of one variable is its entropy. */
#define SINGLE 6
#define NATURAL 6

/* What the terms share of a point (src/coulomb/slots.ts). */
struct plasma {
  double kT, density, temperature, x, rs, cube_root, gamma_e, log_gamma_e, root_gamma_e, root_density, root;
  double log_density, electron_energy, t;
};

static double arsinh_entropy[17];
static double arctangent_deficit[13];
static double logarithm_entropy[13];
static double relativity_series[14];
static double oscillators[4];
static double debye_hueckel_limit;
#define OSCILLATOR_TERMS 13
#define SHORT_SERIES 8
static double oscillator_series[OSCILLATOR_TERMS];

static void fill_coulomb(void) {
  static const double bernoulli[OSCILLATOR_TERMS] = {
      1.0 / 6,           -1.0 / 30,      1.0 / 42,           -1.0 / 30,      5.0 / 66,           -691.0 / 2730, 7.0 / 6,
      -3617.0 / 510,     43867.0 / 798,  -174611.0 / 330,    854513.0 / 138, -236364091.0 / 2730, 8553103.0 / 6,
  };
  double c = 1;
  for (int n = 1; n <= 17; n++) {
    c *= (0.5 - n) / n;
    arsinh_entropy[n - 1] = -c * (2 * n) / (2 * n + 1);
  }
  for (int i = 0; i < 13; i++) {
    const int sign = i % 2 ? -1 : 1;
    arctangent_deficit[i] = sign / (2 * i + 3.0);
    logarithm_entropy[i] = sign * (i + 1) / (i + 2.0);
  }
  debye_hueckel_limit = sqrt(1.5) * 0.300483986662 / cbrt(4 / (9 * PI));
  double binomial = 1;
  for (int n = 0; n < 14; n++) {
    relativity_series[n] = 2 * binomial / (2 * n + 3);
    binomial *= (-0.5 - n) / (n + 1);
  }
  const double g1 = 1.17225, w1 = 0.861406, g2 = 3 - g1, w2 = sqrt((1 - g1 * w1 * w1) / g2);
  oscillators[0] = g1;
  oscillators[1] = w1;
  oscillators[2] = g2;
  oscillators[3] = w2;
  double factorial = 1;
  for (int i = 0; i < OSCILLATOR_TERMS; i++) {
    const int n = 2 * i + 2;
    factorial *= n * (n - 1);
    oscillator_series[i] = bernoulli[i] / (n * factorial) * (g1 * pow(w1, n) + g2 * pow(w2, n));
  }
}

/* ---- Liquid ---- */

static void add_liquid_correlation(double *u, const struct plasma *point, const double *ion) {
  const double a1 = -0.907, a2 = 0.62954, a3 = -sqrt(3) / 2 - a1 / sqrt(a2);
  const double b1 = 0.00456, b2 = 211.6, b3 = -1e-4, b4 = 0.00462;
  const double gamma = point->gamma_e * ion[ION_Z53], x = ion[ION_X];
  const double square = gamma * gamma, root = sqrt(gamma);
  const double reciprocal = 1 / (a2 + gamma);
  const double z1 = gamma * reciprocal, root_z1 = sqrt(z1);
  const double z2 = gamma / (1 + gamma);
  const double saturation = 1 / (b2 + gamma);
  const double z3 = gamma * saturation;
  const double z4 = square / (b4 + square);
  const double e1 = a1 * gamma * root_z1, e2 = a3 * root * z2, e3 = b1 * gamma * z3, e4 = b3 * z4;
  double s1, s2, s3;
  if (gamma < 0.06) {
    const double y1 = gamma / a2, y3 = gamma / b2;
    s1 = a1 * a2 * y1 * sqrt(y1) * horner(arsinh_entropy, 17, y1);
    s2 = e2 - 2 * a3 * gamma * root * horner(arctangent_deficit, 13, gamma);
    s3 = b1 * b2 * y3 * y3 * horner(logarithm_entropy, 13, y3);
  } else {
    const double y1 = gamma / a2, root_y1 = sqrt(y1), root_of_1 = sqrt(1 + y1);
    const double arsinh = y1 < 1 ? log1p(root_y1 + y1 / (1 + root_of_1)) : log(root_y1 + root_of_1);
    s1 = a1 * a2 * (arsinh - root_z1);
    s2 = e2 - 2 * a3 * (root - atan(root));
    s3 = b1 * b2 * (log1p(gamma / b2) - z3);
  }
  const double ratio = square / b4;
  const double s4 = e4 - 0.5 * b3 * (ratio < 0.5 ? log1p(ratio) : log(1 + ratio));
  const double energy = e1 + e2 + e3 + e4, entropy = s1 + s2 + s3 + s4;
  const double d1 = 0.5 * e1 * a2 * reciprocal, d3 = e3 * b2 * saturation;
  u[0] += x * (energy - entropy);
  u[1] += x * energy;
  u[2] += x * (d1 + e2 * (0.5 - z2) + d3 + e4 * (1 - 2 * z4));
  u[5] += x * entropy;
}

static void add_two_oscillators(double *u, const struct plasma *point, const double *ion) {
  const double theta = point->root * ion[ION_THETA], x = ion[ION_X];
  if (theta < 1) {
    const double y = theta * theta, c = x * y;
    double value = 0, slope = 0, bend = 0;
    for (int n = (y < 0.1 ? SHORT_SERIES : OSCILLATOR_TERMS) - 1; n >= 0; n--) {
      bend = bend * y + slope;
      slope = slope * y + value;
      value = value * y + oscillator_series[n];
    }
    const double first = 2 * y * slope;
    u[0] += c * value;
    u[1] += c * (2 * value + first);
    u[2] += c * (2 * value + 5 * first + 8 * y * y * bend);
    u[5] += c * (value + first);
    return;
  }
  for (int i = 0; i < 4; i += 2) {
    const double g = x * oscillators[i], frequency = oscillators[i + 1] * theta;
    const double decay = exp(-frequency);
    const double lost = frequency < 0.7 ? -expm1(-frequency) : 1 - decay;
    const double n = decay / lost;
    const double logarithm = log(lost / frequency);
    const double energy = frequency * n, heat = energy * (frequency + energy);
    u[0] += g * (0.5 * frequency + logarithm);
    u[1] += g * (0.5 * frequency + energy - 1);
    u[2] += g * (1 - heat);
    u[5] += g * (energy - 1 - logarithm);
  }
}

/* {f, D ln f, D^2 ln f} to {f, rho f', rho^2 f''}. */
static inline void from_logarithms(double *r) {
  const double f = r[0], l1 = r[1], l2 = r[2];
  r[1] = l1 * f;
  r[2] = (l1 * (l1 - 1) + l2) * f;
}

static void prepare_polarisation(const struct plasma *point, double *lorentz, double *by_rs, double *dilution) {
  const double x = point->x, rs = point->rs, x2 = x * x;
  const double rest = 1 / (1 + x2), w = x2 * rest, second = -2.0 / 9 * w * rest;
  lorentz[0] = sqrt(rest);
  lorentz[1] = -w / 3;
  lorentz[2] = second;
  from_logarithms(lorentz);
  by_rs[0] = sqrt(rest) / rs;
  by_rs[1] = rest / 3;
  by_rs[2] = second;
  from_logarithms(by_rs);
  const double rs2 = rs * rs, left = 1 / (1 + 6 * rs2), q = 6 * rs2 * left;
  dilution[0] = rs * rs2 * left;
  dilution[1] = 2.0 / 3 * q - 1;
  dilution[2] = -4.0 / 9 * q * left;
  from_logarithms(dilution);
}

static void add_liquid_polarisation(double *f, const struct plasma *point, const double *ion, const double *lorentz,
                                    const double *by_rs, const double *dilution) {
  const double gamma = point->gamma_e, root = point->root_gamma_e, x = point->x, rs = point->rs;
  const double nu = ion[ION_NU], power = exp(nu * point->log_gamma_e);
  const double x2 = x * x, linear = ion[ION_H1] * x, square = ion[ION_H2] * x2;
  const double inverse = 1 / (1 + linear + square), below = (linear + 2 * square) / 3;
  const double h = (1 + 0.2 * x2) * inverse;
  const double hR = (2.0 / 15 * x2 - h * below) * inverse;
  const double hRR = (4.0 / 45 * x2 - 2 * hR * below - h * (linear + 4 * square) / 9) * inverse;

  const double v = gamma * ion[ION_Z3] / (rs * rs * rs), reciprocal = 1 / (21 + v), z = v * reciprocal;
  const double p = nu + 1, q = nu + 1.5;
  const double m = ion[ION_W] * root * reciprocal, c = ion[ION_C_TF] * power * gamma;
  const double debye = ion[ION_C_DH] * gamma * root;
  const double g1 = 1 + m, g1R = -m * z, g1RR = m * z * (2 * z - 1);
  const double pG = p + m * (q - z);
  const double nG0 = p * (p - 1) + m * (q * (q - 1) - 2 * q * z + 2 * z * z);
  const double n = debye + c * h * g1, nG = 1.5 * debye + c * h * pG, nGG = 0.75 * debye + c * h * nG0;
  const double nR = c * (hR * g1 + h * g1R), nRR = c * (hRR * g1 + 2 * hR * g1R + h * g1RR);
  const double nGR = c * (hR * pG + h * g1R * (q + 1 - 2 * z));

  const double e = 1 / (ion[ION_E0] + 2 * gamma), y = 2 * gamma * e, zeta = ion[ION_ZETA];
  const double r = zeta * dilution[0], rR = zeta * dilution[1], rRR = zeta * (dilution[2] + dilution[1]);
  const double amplitude = ion[ION_A] * power;
  const double s = amplitude * by_rs[0], sR = amplitude * by_rs[1], sRR = amplitude * (by_rs[2] + by_rs[1]);
  const double b = ion[ION_B] * root;
  const double l = b * lorentz[0], lR = b * lorentz[1], lRR = b * (lorentz[2] + lorentz[1]);
  const double g2 = 1 + r * (1 + e), g2R = rR * (1 + e), nuG = nu * g2 - r * e * y;
  const double d = 1 + l + s * g2, dG = 0.5 * l + s * nuG;
  const double dGG = -0.25 * l + s * (nu * (nu - 1) * g2 + 2 * r * e * y * (y - nu));
  const double dR = lR + sR * g2 + s * g2R;
  const double dRR = lRR + sRR * g2 + 2 * sR * g2R + s * rRR * (1 + e);
  const double dGR = 0.5 * lR + sR * nuG + s * (nu * g2R - rR * e * y);

  const double over = 1 / d, u = n * over;
  const double uG = (nG - u * dG) * over, uR = (nR - u * dR) * over;
  const double uGG = (nGG - 2 * uG * dG - u * dGG) * over, uRR = (nRR - 2 * uR * dR - u * dRR) * over;
  const double uGR = (nGR - uG * dR - uR * dG - u * dGR) * over;
  const double first = uR + uG / 3, share = -ion[ION_X];
  f[0] += share * u;
  f[1] += share * first;
  f[2] += share * uG;
  f[3] += share * (uRR + 2.0 / 3 * uGR + (uGG + uG) / 9 - first);
  f[4] += share * (uGR + (uG + uGG) / 3);
  f[5] += share * uGG;
}

static void add_mixture(double *u, const struct plasma *point, const struct mixture *mixture) {
  const double alpha = mixture->alpha, beta = mixture->beta;
  const double power = exp(alpha * (point->log_gamma_e + mixture->log_coupling));
  const double p = 1 / (1 + mixture->a * power), q = 1 / (1 + mixture->b * power);
  const double weak = mixture->amplitude * point->gamma_e * point->root_gamma_e;
  const double f = weak * p * exp(beta * log(q));
  const double slope_p = p * (1 - p), slope_q = q * (1 - q);
  const double l = alpha * (p + beta * q), l1 = -alpha * alpha * (slope_p + beta * slope_q);
  u[0] += f;
  u[1] += f * l;
  u[2] += f * (l * l + l1 - l);
  u[5] += f * (l - 1);
}

/* ---- Crystal ---- */

static inline void add_ground(double *out, double energy, double p) {
  out[0] += energy;
  out[1] += energy * p;
  out[3] += energy * (p * (p - 1));
}

static void add_ground_state(double *out, const struct plasma *point, const struct matter *matter) {
  add_ground(out, (matter->madelung + matter->alloy) * point->cube_root, 1.0 / 3);
  add_ground(out, matter->zero_point * point->root_density, 0.5);
  add_ground(out, matter->anharmonic_ground * point->cube_root * point->cube_root, 2.0 / 3);
}

static void add_phonons(double *u, const struct plasma *point, const double *ion) {
  const double theta = point->root * ion[ION_THETA], weight = ion[ION_X];
  if (theta > 1e9) {
    const double q = weight / (ALPHA_8 * theta * theta * theta);
    u[0] -= q;
    u[1] += 3 * q;
    u[5] += 4 * q;
    u[2] -= 12 * q;
    return;
  }
  const double *c = phononCoefficients;
  const int length = sizeof phononCoefficients / sizeof(double);
  double a0 = 0, a1 = 0, a2 = 0, b0 = 0, b1 = 0, b2 = 0;
  for (int i = length - 10; i >= 0; i -= 10) {
    a0 = a0 * theta + c[i];
    b0 = b0 * theta + c[i + 1];
    a1 = a1 * theta + c[i + 2];
    b1 = b1 * theta + c[i + 3];
    a2 = a2 * theta + c[i + 4];
    b2 = b2 * theta + c[i + 5];
  }
  const double r = 1 / b0, q0 = a0 * r, q1 = (a1 - q0 * b1) * r, q2 = (a2 - q0 * b2 - 2 * q1 * b1) * r;
  u[0] -= weight * q0;
  u[1] -= weight * q1;
  u[2] -= weight * q2;
  u[5] += weight * (q0 - q1);
  if (theta > 2800) return;
  double keep = 1, lost = 0, d1 = 0, d2 = 0;
  for (int i = 0; i < 3; i++) {
    const double x = phononExponents[i] * theta;
    const double e = exp(-x);
    const double rest = x < 0.7 ? -expm1(-x) : 1 - e;
    const double xn = x * e / rest;
    lost += e * keep;
    keep *= rest;
    d1 += xn;
    d2 -= xn * (x + xn);
  }
  const double logarithm = theta < 4 ? log(keep) : log1p(-lost);
  u[0] += weight * logarithm;
  u[1] += weight * d1;
  u[2] += weight * d2;
  u[5] += weight * (d1 - logarithm);
}

static void add_anharmonic(double *f, const struct plasma *point, const double *ion) {
  const double theta = point->root * ion[ION_THETA], y = ANHARMONIC_SUPPRESSION * theta * theta;
  if (y > 800) return;
  const double e = exp(-y);
  const double r = point->temperature / (ion[ION_GAMMA] * point->cube_root);
  const double p1 = anharmonic[0] * r, p2 = anharmonic[1] / 2 * r * r, p3 = anharmonic[2] / 3 * r * r * r;
  const double weight = -ion[ION_X] * e;
  const double s0 = p1 + p2 + p3, s1 = p1 + 2 * p2 + 3 * p3, s2 = p1 + 4 * p2 + 9 * p3, y2 = y * y;
  f[0] += weight * s0;
  f[1] -= weight * (s1 / 3 + y * s0);
  f[2] -= weight * (s1 + 2 * y * s0);
  f[3] += weight * (s2 / 9 + (2 * y + 1) * (s1 / 3) + y2 * s0);
  f[4] += weight * (s2 / 3 + 5.0 / 3 * y * s1 + 2 * (y2 - y) * s0);
  f[5] += weight * (s2 + (4 * y + 1) * s1 + (4 * y2 - 2 * y) * s0);
}

static void add_crystal_polarisation(double *out, const struct plasma *point, const double *ion, double ions) {
  const double x = point->x, x2 = x * x;
  const double w = ion[ION_B2] / x2, v = w / (1 + w);
  const double e = -ions * ion[ION_X] * ion[ION_GAMMA] * point->cube_root * ion[ION_F_INF] * sqrt(1 + w);
  const double slope = (1 - v) / 3, bend = 2.0 / 9 * v * (1 - v);
  const double over = ion[ION_B3] + ion[ION_A3] * x2, below = 1 + ion[ION_B4] * x2;
  const double m = ion[ION_A3] * x2 / over, k = ion[ION_B4] * x2 / below, s = ion[ION_S];
  const double g = e * over / below * exp(s * (ion[ION_LOG_Q] + point->log_density / 6));
  const double slope_g = slope + 2.0 / 3 * (m - k) + s / 6;
  const double bend_g = bend + 4.0 / 9 * (m * (1 - m) - k * (1 - k));
  const double g1 = g * slope_g, g2 = g * (slope_g * slope_g + bend_g - slope_g);
  out[0] += e + g;
  out[1] += e * slope + g1;
  out[3] += e * (slope * slope + bend - slope) + g2;
  const double theta = point->root * ion[ION_THETA], y = 0.205 * 0.205 * theta * theta;
  if (y > 800) return;
  const double q = exp(-y), c = 1 - 2 / 2.718281828459045, p = 1 / (1 + q);
  const double log1q = log1p(q), num = y + log1q, log2 = log1p(-c * q), den = 1 + log2;
  const double b = c * q / (1 - c * q);
  const double n2 = y * y * p * (1 - p), d1 = y * b, d2 = -y * y * b * (1 + b);
  const double m1 = -(y * (q * p) + log1q) / num, m2 = n2 / num - m1 * (2 + m1);
  const double e1 = d1 / den, e2 = d2 / den - e1 * e1;
  const double half = 0.5 * s, h0 = expm1(half * log1p((log1q / y - log2) / den)), h = 1 + h0;
  const double l1 = half * (m1 - e1), l2 = half * (m2 - e2);
  const double k1 = h * l1, k2 = h * (l2 + l1 * l1);
  const double h1 = -2 * k1, h2 = 4 * k2 + 6 * k1;
  out[0] += g * h0;
  out[1] += g1 * h0 - 0.5 * g * h1;
  out[2] += g * h1;
  out[3] += g2 * h0 - g1 * h1 + g * (0.25 * h2 + 0.75 * h1);
  out[4] += g1 * h1 - 0.5 * g * (h1 + h2);
  out[5] += g * h2;
}

/* ---- Exchange and correlation ---- */

struct rational {
  double q, qT, qTT;
};

/* (n0 + n2 t^2 + n3 t^3 + n4 t^4)/(1 + d2 t^2 + d4 t^4) and its natural derivatives. */
static inline struct rational rational(double n0, double n2, double n3, double n4, double m2, double m4) {
  const double r = 1 / (1 + m2 + m4), mT = 2 * m2 + 4 * m4;
  struct rational f;
  f.q = (n0 + n2 + n3 + n4) * r;
  f.qT = (2 * n2 + 3 * n3 + 4 * n4 - f.q * mT) * r;
  f.qTT = (2 * n2 + 6 * n3 + 12 * n4 - 2 * f.qT * mT - f.q * (2 * m2 + 12 * m4)) * r;
  return f;
}

static void exchange_relativity(const struct plasma *point, double *out) {
  const double x = point->x, x2 = x * x, energy = sqrt(1 + x2);
  const double slope = 2 * x / energy, slope1 = slope / (1 + x2);
  double y, y1;
  if (x < 0.25) {
    y = horner(relativity_series, 14, x2) * x;
    y1 = slope - 2 * y;
  } else {
    const double logarithm = log(x + energy);
    y = (x * energy - logarithm) / x2;
    y1 = 2 * (logarithm / x2 - 1 / (x * energy));
  }
  const double y2 = slope1 - 2 * y1, phi1 = -3 * y * y1, phi2 = -3 * (y1 * y1 + y * y2);
  out[0] = -1.5 * y * y;
  out[1] = phi1 / 3;
  out[2] = phi2 / 9 - phi1 / 3;
}

static void add_exchange(double *out, const struct plasma *point) {
  double relativity[3];
  exchange_relativity(point, relativity);
  const double t = point->t, rs = point->rs, s = sqrt(rs), t2 = t * t, t4 = t2 * t2;
  const double v = t > 1.0 / 60 ? 1 / t : 60;
  double exponential = 0, tau = 1, tauT = 0, tauTT = 0;
  if (t > 1.0 / 60) {
    exponential = exp(-v);
    const double square = exponential * exponential;
    const double lost = v < 0.4 ? expm1(-2 * v) : square - 1;
    const double over = 1 / (2 + lost), slope = 4 * square * over * over * v;
    tau = -lost * over;
    tauT = -slope;
    tauTT = 2 * slope * (1 - tau * v);
  }
  double sigma = 1, sigmaT = 0, sigmaTT = 0;
  if (t > 1.0 / 729) {
    const double w = 1 / sqrt(t);
    const double square = exp(-2 * w);
    const double lost = w < 0.4 ? expm1(-2 * w) : square - 1;
    const double over = 1 / (2 + lost), slope = 4 * square * over * over * w;
    sigma = -lost * over;
    sigmaT = -0.5 * slope;
    sigmaTT = slope * (0.75 - 0.5 * sigma * w);
  }

  struct rational f = rational(0.75, 3.04363 * t2, -0.09227 * t2 * t, 1.7035 * t4, 8.31051 * t2, 5.1105 * t4);
  const double a = 0.610887 * f.q * tau, aT = 0.610887 * (f.qT * tau + f.q * tauT);
  const double aTT = 0.610887 * (f.qTT * tau + 2 * f.qT * tauT + f.q * tauTT);
  f = rational(0.3436902, 7.82159531356 * t2, 0, 0.300483986662 * t4, 15.8443467125 * t2, debye_hueckel_limit * t4);
  const double b = s * f.q * sigma, bT = s * (f.qT * sigma + f.q * sigmaT);
  const double bTT = s * (f.qTT * sigma + 2 * f.qT * sigmaT + f.q * sigmaTT);
  f = rational(0.72700876, 2.38264734144 * t2, 0, 0.30221237251 * t4, 4.39347718395 * t2, 0.729951339845 * t4);
  const double d = s * f.q * sigma, dT = s * (f.qT * sigma + f.q * sigmaT);
  const double dTT = s * (f.qTT * sigma + 2 * f.qT * sigmaT + f.q * sigmaTT);
  f = rational(0.25388214, 0.815795138599 * t2, 0, 0.0646844410481 * t4, 15.0984620477 * t2, 0.230761357474 * t4);
  const double e = rs * f.q * tau, eT = rs * (f.qT * tau + f.q * tauT);
  const double eTT = rs * (f.qTT * tau + 2 * f.qT * tauT + f.q * tauTT);
  const double x = 0.8759442 - 0.230130843551 * exponential, xT = -0.230130843551 * exponential * v;
  const double c = x * e, cT = xT * e + x * eT, cTT = xT * (v - 2) * e + 2 * xT * eT + x * eTT;

  const double dS = d + 2 * e, dTS = dT + 2 * eT, i = 1 / (1 + d + e);
  const double g = (a + b + c) * i, gT = (aT + bT + cT - g * (dT + eT)) * i;
  const double gS = (b + 2 * c - g * dS) * i;
  const double gTT = (aTT + bTT + cTT - 2 * gT * (dT + eT) - g * (dTT + eTT)) * i;
  const double gSS = (b + 4 * c - 2 * gS * dS - g * (d + 4 * e)) * i;
  const double gTS = (bT + 2 * cT - gT * dS - gS * (dT + eT) - g * dTS) * i;
  const double phi = relativity[0], phiR = relativity[1];
  const double h = g + a * phi, hT = gT + aT * phi, hTT = gTT + aTT * phi;
  const double hR = a * phiR - gS / 6, hRR = gSS / 36 + a * (relativity[2] + phiR), hTR = aT * phiR - gTS / 6;
  const double energy = point->electron_energy;
  const double first = h / 3 + hR - 2.0 / 3 * hT;
  const double second = h / 9 + 2.0 / 3 * hR + hRR - 4.0 / 9 * hT - 4.0 / 3 * hTR + 4.0 / 9 * (hTT + hT);
  out[0] -= energy * h;
  out[1] -= energy * first;
  out[2] -= energy * hT;
  out[3] -= energy * (second - first);
  out[4] -= energy * (hT / 3 + hTR - 2.0 / 3 * (hT + hTT));
  out[5] -= energy * hTT;
}

/* ---- The sum (coulomb-plasma.ts) ---- */

static inline void add_thermal(double *out, double kT, double a, const double *u) {
  out[0] += kT * u[0];
  out[1] += kT * a * u[1];
  out[2] -= kT * u[5];
  out[3] += kT * (a * a * u[2] + a * (a - 1) * u[1]);
  out[4] -= kT * a * u[2];
  out[5] += kT * u[2];
}

static void coulomb_terms(double *natural, struct plasma *plasma, const struct matter *matter, int crystal) {
  double of_gamma[SINGLE] = {0}, of_theta[SINGLE] = {0}, of_both[NATURAL] = {0};
  for (int i = 0; i < NATURAL; i++) natural[i] = 0;
  if (crystal) {
    add_ground_state(natural, plasma, matter);
    plasma->log_density = log(plasma->density);
    for (int i = 0; i < matter->ion_count; i++) {
      const double *ion = matter->ions[i];
      add_phonons(of_theta, plasma, ion);
      add_anharmonic(of_both, plasma, ion);
      add_crystal_polarisation(natural, plasma, ion, matter->ions_boltzmann);
    }
    const double constant = matter->mixing + matter->spin;
    of_theta[0] += constant;
    of_theta[5] -= constant;
  } else {
    double lorentz[3], by_rs[3], dilution[3];
    plasma->log_gamma_e = log(plasma->gamma_e);
    plasma->root_gamma_e = sqrt(plasma->gamma_e);
    prepare_polarisation(plasma, lorentz, by_rs, dilution);
    for (int i = 0; i < matter->ion_count; i++) {
      const double *ion = matter->ions[i];
      add_liquid_correlation(of_gamma, plasma, ion);
      add_two_oscillators(of_theta, plasma, ion);
      add_liquid_polarisation(of_both, plasma, ion, lorentz, by_rs, dilution);
    }
    add_mixture(of_gamma, plasma, &matter->mixture);
    add_thermal(natural, plasma->kT, 1.0 / 3, of_gamma);
  }
  add_thermal(natural, plasma->kT, 0.5, of_theta);
  const double kT = plasma->kT;
  natural[0] += kT * of_both[0];
  natural[1] += kT * of_both[1];
  natural[2] += kT * (of_both[0] - of_both[2]);
  natural[3] += kT * of_both[3];
  natural[4] += kT * (of_both[1] - of_both[4]);
  natural[5] += kT * of_both[5];
  add_exchange(natural, plasma);
}

#endif
