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
static const double *density, *temperature;
static double *cold, *cells; /* coefficients: six an interval, 36 a cell */
static double *blocks;       /* by block: first, cells along density, along temperature, exponent */

/* value, slope and curvature at both ends of a cell to the coefficients of the powers, in place */
static void toPowers(double *e) {
  const double bend = 0.5 * e[2], slope = e[4] - e[1] - e[2], rise = e[3] - e[0] - e[1] - bend, turn = 0.5 * (e[5] - e[2]);
  e[2] = bend;
  e[3] = 10 * rise - 4 * slope + turn;
  e[4] = 7 * slope - 15 * rise - 2 * turn;
  e[5] = 6 * rise - 3 * slope + turn;
}

static void fillPatch(double *patch, const double *corner, int stride) {
  for (int row = 0; row < 6; row++) {
    const double *f = row < 3 ? corner + 3 * row : corner + stride + 3 * (row - 3);
    for (int j = 0; j < 6; j++) patch[6 * row + j] = j < 3 ? f[j] : f[9 + j - 3];
    toPowers(patch + 6 * row);
  }
  for (int j = 0; j < 6; j++) {
    double line[6];
    for (int row = 0; row < 6; row++) line[row] = patch[6 * row + j];
    toPowers(line);
    for (int row = 0; row < 6; row++) patch[6 * row + j] = line[row];
  }
}

/* the polynomial of degree five at t: value, slope, half the curvature */
static inline void horner(const double *a, double t, double *value, double *slope, double *bend) {
  const double a4 = a[5] * t + a[4], a3 = a4 * t + a[3], a2 = a3 * t + a[2], a1 = a2 * t + a[1];
  const double b4 = a[5] * t + a4, b3 = b4 * t + a3, b2 = b3 * t + a2;
  *value = a1 * t + a[0];
  *slope = b2 * t + a1;
  *bend = ((a[5] * t + b4) * t + b3) * t + b2;
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
  const double *cell = cells + (long)block[0] + 36 * (i * n + j);
  const double t = yn - j, w = xm - i;
  double value[6], slope[6], bend[6];
  for (int row = 0; row < 6; row++) horner(cell + 6 * row, t, value + row, slope + row, bend + row);
  const double perU = u.perUnit * m, perV = v.perUnit * n;
  double l, lu, lv, luu, luv, unused;
  horner(value, w, &l, &lu, &luu);
  horner(slope, w, &lv, &luv, &unused);
  lu *= perU, lv *= perV, luu *= 2 * perU * perU, luv *= perU * perV;
  const double lvv =
      2 * perV * perV * (((((bend[5] * w + bend[4]) * w + bend[3]) * w + bend[2]) * w + bend[1]) * w + bend[0]);

  const double xc = (x - coldStart) * coldPerUnit;
  int k = (int)xc;
  if (k > intervals - 1) k = intervals - 1;
  double f0, f1, f2;
  horner(cold + 6 * k, xc - k, &f0, &f1, &f2);
  f1 *= coldPerUnit, f2 *= 2 * coldPerUnit * coldPerUnit;

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
  const double *coldNodes = data + 11;
  blocks = data + 11 + 3 * (intervals + 1);
  const int blockCount = u.blocks * v.blocks;
  const double *nodes = blocks + 4 * blockCount;
  density = nodes + (long)data[10];
  temperature = density + count;
  cold = malloc(6 * sizeof(double) * intervals);
  for (int i = 0; i < intervals; i++) {
    for (int j = 0; j < 6; j++) cold[6 * i + j] = coldNodes[3 * i + j];
    toPowers(cold + 6 * i);
  }
  long cellCount = 0, next = 0;
  for (int b = 0; b < blockCount; b++) cellCount += blocks[4 * b] < 0 ? 0 : (long)(blocks[4 * b + 1] * blocks[4 * b + 2]);
  cells = malloc(36 * sizeof(double) * cellCount);
  for (int b = 0; b < blockCount; b++) {
    if (blocks[4 * b] < 0) continue;
    const double *first = nodes + (long)blocks[4 * b];
    const int m = (int)blocks[4 * b + 1], n = (int)blocks[4 * b + 2], stride = 9 * (n + 1);
    blocks[4 * b] = next;
    for (int i = 0; i < m; i++) {
      for (int j = 0; j < n; j++, next += 36) fillPatch(cells + next, first + i * stride + 9 * j, stride);
    }
  }
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
