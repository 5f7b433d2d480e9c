/*
 * The look-up of a free-energy table (src/tables) in C: the same algorithm, for the ratio of times.
 *
 * table <file>: the file holds doubles: counts and axes, the cold curve, the blocks and nodes of one sheet, the points.
 * Reads a letter from stdin: 't' looks all points up once and answers the nanoseconds per point, '?' the six members of all.
 */
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

typedef struct {
  double start, perUnit;
  int blocks;
} Axis;

static Axis u, v;
static double coldStart, coldPerUnit;
static int intervals, count;
static const double *cold, *nodes, *density, *temperature;
static const double *blocks; /* by block: first, cells along density, along temperature, exponent */

typedef struct {
  double a[6], b[6], c[6];
} Basis;

static inline void basis(double t, Basis *h) {
  const double r = 1 - t, t2 = t * t, r2 = r * r, tr = t * r;
  h->a[1] = r2 * tr * (1 + 3 * t);
  h->a[2] = 0.5 * r2 * r * t2;
  h->a[3] = t2 * t * (1 + 3 * r + 6 * r2);
  h->a[4] = -t2 * tr * (1 + 3 * r);
  h->a[5] = 0.5 * t2 * t * r2;
  h->b[1] = r2 * (1 + 2 * t - 15 * t2);
  h->b[2] = 0.5 * r * tr * (2 - 5 * t);
  h->b[3] = 30 * tr * tr;
  h->b[4] = t2 * (1 + 2 * r - 15 * r2);
  h->b[5] = -0.5 * t * tr * (2 - 5 * r);
  h->c[1] = -12 * tr * (3 - 5 * t);
  h->c[2] = r * (1 - 8 * t + 10 * t2);
  h->c[3] = 60 * tr * (r - t);
  h->c[4] = 12 * tr * (3 - 5 * r);
  h->c[5] = t * (1 - 8 * r + 10 * r2);
}

static inline double along(const double *h, double first, double rise, double f1, double f2, double f4, double f5) {
  return first + h[3] * rise + h[1] * f1 + h[2] * f2 + h[4] * f4 + h[5] * f5;
}

static void lookUp(double rho, double kelvin, double *members) {
  const double x = log(rho), y = log(kelvin);
  const double xb = (x - u.start) * u.perUnit, yb = (y - v.start) * v.perUnit;
  int p = (int)xb, q = (int)yb;
  if (p > u.blocks - 1) p = u.blocks - 1;
  if (q > v.blocks - 1) q = v.blocks - 1;
  const double *block = blocks + 4 * (p * v.blocks + q);
  const int m = (int)block[1], n = (int)block[2];
  const double xm = (xb - p) * m, yn = (yb - q) * n;
  int i = (int)xm, j = (int)yn;
  if (i > m - 1) i = m - 1;
  if (j > n - 1) j = n - 1;
  const int stride = 9 * (n + 1);
  const double *corner = nodes + (long)block[0] + i * stride + 9 * j;
  Basis g, h;
  basis(yn - j, &g);
  basis(xm - i, &h);
  double value[6], slope[6], bend[6];
  for (int row = 0; row < 6; row++) {
    const double *f = row < 3 ? corner + 3 * row : corner + stride + 3 * (row - 3);
    const double rise = f[9] - f[0];
    value[row] = along(g.a, f[0], rise, f[1], f[2], f[10], f[11]);
    slope[row] = along(g.b, 0, rise, f[1], f[2], f[10], f[11]);
    bend[row] = along(g.c, 0, rise, f[1], f[2], f[10], f[11]);
  }
  const double perU = u.perUnit * m, perV = v.perUnit * n;
  const double l = along(h.a, value[0], value[3] - value[0], value[1], value[2], value[4], value[5]);
  const double lu = perU * along(h.b, 0, value[3] - value[0], value[1], value[2], value[4], value[5]);
  const double lv = perV * along(h.a, slope[0], slope[3] - slope[0], slope[1], slope[2], slope[4], slope[5]);
  const double luu = perU * perU * along(h.c, 0, value[3] - value[0], value[1], value[2], value[4], value[5]);
  const double luv = perU * perV * along(h.b, 0, slope[3] - slope[0], slope[1], slope[2], slope[4], slope[5]);
  const double lvv = perV * perV * along(h.a, bend[0], bend[3] - bend[0], bend[1], bend[2], bend[4], bend[5]);

  const double xc = (x - coldStart) * coldPerUnit;
  int k = (int)xc;
  if (k > intervals - 1) k = intervals - 1;
  Basis e;
  basis(xc - k, &e);
  const double *f = cold + 3 * k;
  const double rise = f[3] - f[0];
  const double f0 = along(e.a, f[0], rise, f[1], f[2], f[4], f[5]);
  const double f1 = coldPerUnit * along(e.b, 0, rise, f[1], f[2], f[4], f[5]);
  const double f2 = coldPerUnit * coldPerUnit * along(e.c, 0, rise, f[1], f[2], f[4], f[5]);

  const double heat = ldexp(exp(l), (int)block[3]);
  const double uu = luu + lu * lu, uv = luv + lu * lv, vv = lvv + lv * lv;
  members[0] = f0 + heat * (lv - 1);
  members[1] = heat * lv;
  members[2] = heat * (vv - lv);
  members[3] = f1 - heat * lu;
  members[4] = f2 + f1 - heat * (uu + lu);
  members[5] = -heat * uv;
}

int main(int arguments, char **names) {
  FILE *file = arguments == 2 ? fopen(names[1], "rb") : NULL;
  if (file == NULL) return 1;
  fseek(file, 0, SEEK_END);
  const long bytes = ftell(file);
  rewind(file);
  double *data = malloc(bytes);
  if (fread(data, 1, bytes, file) != (size_t)bytes) return 1;
  u = (Axis){data[0], data[1], (int)data[2]};
  v = (Axis){data[3], data[4], (int)data[5]};
  coldStart = data[6], coldPerUnit = data[7], intervals = (int)data[8], count = (int)data[9];
  cold = data + 11;
  blocks = cold + 3 * (intervals + 1);
  nodes = blocks + 4 * u.blocks * v.blocks;
  density = nodes + (long)data[10];
  temperature = density + count;
  double *members = malloc(6 * sizeof(double) * count);
  for (int letter; (letter = getchar()) != EOF;) {
    if (letter == 't') {
      struct timespec from, to;
      clock_gettime(CLOCK_MONOTONIC, &from);
      for (int i = 0; i < count; i++) lookUp(density[i], temperature[i], members + 6 * i);
      clock_gettime(CLOCK_MONOTONIC, &to);
      const double nanoseconds = (to.tv_sec - from.tv_sec) * 1e9 + (double)(to.tv_nsec - from.tv_nsec);
      const double each = nanoseconds / count;
      fwrite(&each, sizeof each, 1, stdout);
    } else if (letter == '?') {
      fwrite(members, sizeof(double), 6 * (size_t)count, stdout);
    }
    fflush(stdout);
  }
  return 0;
}
