/* Electrons and positrons, any composition, from a table of fermistate in an .npz file. C99, no library; for little-endian
   machines.

       cc -O2 electron_table.c -o electron_table -lm
       ./electron_table electrons.npz 3.0110703768336843e25 1e9       net electrons per cm^3, temperature in K

   In a program of your own compile with -D ELECTRON_TABLE_NO_MAIN, call electron_table_read once and electron_gas at
   each point. docs/guide/electron-table.md of fermistate has the formulas and the errors. */
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

struct electron_table {
  int rows, columns;            /* nodes of eta and of y = ln theta */
  double *eta, *y, *nodes;      /* nodes[row][column][7][7]: d^(i+j) L/(d eta^i d y^j) */
  double rest, pressure, density; /* units: K, dyn/cm^2, cm^-3 */
};

struct electron_state {
  double pressure, entropy, energy;                    /* dyn/cm^2, erg/(K cm^3), erg/cm^3 without net rest mass */
  double heat_capacity;                                /* at constant volume, erg/(K cm^3) */
  double pressure_by_density, pressure_by_temperature; /* erg, dyn/(cm^2 K) */
  double eta, positrons;                               /* (mu_- - m_e c^2)/kT, cm^-3 */
};

/* Sums over both signs in units of the table, with D = d/d ln theta at fixed eta of the electrons: P, theta n, T s,
   energy, theta n_+, theta dn/d eta, theta D n, D P, D^2 P - D P. */
enum { P, TN, TS, ENERGY, TPLUS, A, B, DP, C, SUMS };

/* ---- the file: an archive of stored .npy members ---- */

static uint32_t number(const unsigned char *at, int bytes) {
  uint32_t value = 0;
  while (bytes--) value = value << 8 | at[bytes];
  return value;
}

/* The doubles of a member; their number into `count`. NULL where there is none. */
static double *member(const unsigned char *file, size_t length, const char *name, int *count) {
  size_t at = 0;
  while (at + 30 <= length && number(file + at, 4) == 0x04034b50) {
    size_t size = number(file + at + 18, 4), letters = number(file + at + 26, 2);
    size_t data = at + 30 + letters + number(file + at + 28, 2);
    if (data + size > length) return NULL;
    if (letters == strlen(name) && memcmp(file + at + 30, name, letters) == 0 && size > 10) {
      size_t head = 10 + number(file + data + 8, 2); /* format 1.0 of .npy */
      if (head > size) return NULL;
      double *values = malloc(size - head + 1);
      if (values == NULL) return NULL;
      memcpy(values, file + data + head, size - head);
      *count = (int)((size - head) / sizeof(double));
      return values;
    }
    at = data + size;
  }
  return NULL;
}

/* 0, or -1 where the file is no electron table of layout 2. */
int electron_table_read(const char *path, struct electron_table *table) {
  FILE *file = fopen(path, "rb");
  if (file == NULL || fseek(file, 0, SEEK_END) != 0) return -1;
  long length = ftell(file);
  unsigned char *bytes = length > 0 ? malloc((size_t)length) : NULL;
  rewind(file);
  int whole = bytes != NULL && fread(bytes, 1, (size_t)length, file) == (size_t)length;
  fclose(file);
  int counts[7] = {0};
  const char *names[7] = {"axes.degeneracy.npy",  "axes.log_theta.npy",     "surface.nodes.npy",
                          "units.rest_temperature.npy", "units.pressure.npy", "units.density.npy",
                          "format.electron_table_layout.npy"};
  double *found[7] = {0};
  for (int k = 0; whole && k < 7; k++) {
    found[k] = member(bytes, (size_t)length, names[k], &counts[k]);
    whole = found[k] != NULL;
  }
  free(bytes);
  if (!whole || counts[2] != 49 * counts[0] * counts[1] || *found[6] != 2) return -1;
  *table = (struct electron_table){counts[0], counts[1], found[0], found[1], found[2], *found[3], *found[4], *found[5]};
  return 0;
}

/* ---- the table: Hermite interpolation of degree 13 ---- */

static int cell(const double *nodes, int count, double at) {
  int low = 0, high = count - 1;
  while (high - low > 1) {
    int mid = (low + high) / 2;
    if (nodes[mid] <= at) low = mid;
    else high = mid;
  }
  return low;
}

/* Value, first and second derivative of the weights of the 0th..6th derivative at the lower end, then at the upper. */
static void weights(double t, double h, double w[3][14]) {
  static const double choose[7] = {1, 7, 28, 84, 210, 462, 924};   /* C(6 + k, k) */
  static const double inverse[7] = {1, 1, 1. / 2, 1. / 6, 1. / 24, 1. / 120, 1. / 720};
  double scale[9] = {1 / (h * h)}; /* h^(i - d) in slot i - d + 2 */
  for (int k = 1; k < 9; k++) scale[k] = scale[k - 1] * h;
  for (int end = 0; end < 2; end++) {
    double x = end ? 1 - t : t, r = 1 - x, s = 0, s1 = 0, s2 = 0, power[7] = {1};
    for (int k = 1; k < 7; k++) power[k] = power[k - 1] * x;
    double r5 = r * r * r * r * r, v2 = 42 * r5, v1 = -7 * r5 * r, v = r5 * r * r; /* r^7 and its derivatives by x */
    for (int i = 6; i >= 0; i--) { /* x^i/i! r^7 S, S the sum of C(6 + k, k) x^k to k = 6 - i */
      int k = 6 - i;
      s += choose[k] * power[k];
      if (k > 0) s1 += choose[k] * k * power[k - 1];
      if (k > 1) s2 += choose[k] * k * (k - 1) * power[k - 2];
      double u = inverse[i] * power[i], u1 = i > 0 ? inverse[i - 1] * power[i - 1] : 0;
      double u2 = i > 1 ? inverse[i - 2] * power[i - 2] : 0, uv1 = u1 * v + u * v1;
      double value[3] = {u * v * s, uv1 * s + u * v * s1,
                         (u2 * v + 2 * u1 * v1 + u * v2) * s + 2 * uv1 * s1 + u * v * s2};
      if (i == 0) { /* the same without cancellation */
        value[1] = -12012 * power[6] * r5 * r;
        value[2] = -72072 * power[5] * r5 * (r - x);
      }
      for (int d = 0; d < 3; d++) w[d][7 * end + i] = value[d] * scale[i - d + 2] * (end && (i + d) % 2 ? -1 : 1);
    }
  }
}

/* l[i][j] = d^(i+j) L/(d eta^i d y^j), i, j <= 2, within the table. */
static void look_up(const struct electron_table *table, double eta, double y, double l[3][3]) {
  int a = cell(table->eta, table->rows, eta), b = cell(table->y, table->columns, y);
  double he = table->eta[a + 1] - table->eta[a], hy = table->y[b + 1] - table->y[b];
  double de = eta - table->eta[a], dy = y - table->y[b], we[3][14], wy[3][14], rows[3][14];
  weights(de / he, he, we);
  weights(dy / hy, hy, wy);
  const double *corner = table->nodes + 49 * ((size_t)a * table->columns + b);
  /* The plane through a corner is taken out first: large values would round in the derivatives. */
  double plane = corner[0], by_eta = corner[7], by_y = corner[1];
  for (int k = 0; k < 14; k++) {
    for (int d = 0; d < 3; d++) rows[d][k] = 0;
    for (int m = 0; m < 14; m++) {
      int i = k % 7, j = m % 7;
      double value = corner[49 * ((k / 7) * (size_t)table->columns + m / 7) + 7 * i + j];
      if (i + j == 0) value = value - plane - by_eta * he * (k / 7) - by_y * hy * (m / 7);
      else if (i + j == 1) value -= i ? by_eta : by_y;
      for (int d = 0; d < 3; d++) rows[d][k] += wy[d][m] * value;
    }
  }
  for (int i = 0; i < 3; i++)
    for (int j = 0; j < 3; j++) {
      l[i][j] = 0;
      for (int k = 0; k < 14; k++) l[i][j] += we[i][k] * rows[j][k];
    }
  l[0][0] += plane + by_eta * de + by_y * dy;
  l[1][0] += by_eta;
  l[0][1] += by_y;
}

/* Adds one species to the sums: sign 1, electrons at eta; -1, positrons at eta, which moves with ln theta as `rate`. */
static void add_species(const struct electron_table *table, double eta, double theta, int sign, double rate,
                        double *sums) {
  double l[3][3], lowest = table->eta[0];
  look_up(table, eta < lowest ? lowest : eta, log(theta), l);
  if (eta < lowest) { /* classical */
    double d = eta - lowest, growth = expm1(d), c = l[1][0] - 1;
    l[0][0] += d + c * growth;
    l[0][1] += l[1][1] * growth;
    l[0][2] += l[1][2] * growth;
    l[1][0] = 1 + c * (1 + growth);
    l[1][1] *= 1 + growth;
    l[2][0] = c * (1 + growth);
  }
  double p = exp(l[0][0]), a = l[1][0], b = l[0][1];
  double p20 = l[2][0] + a * a, p11 = l[1][1] + a * b, p02 = l[0][2] + b * b;
  double dp = b + rate * a, ddp = p02 + rate * (2 * p11 - a) + rate * rate * p20;
  sums[P] += p;
  sums[TN] += sign * p * a;
  sums[TS] += p * (b - eta * a);
  sums[ENERGY] += p * (b - 1 + (sign < 0 ? 2 * a / theta : 0)); /* T s - P + eta theta n, and the rest mass of pairs */
  if (sign < 0) sums[TPLUS] += p * a;
  sums[A] += p * p20;
  sums[B] += sign * p * (p11 + rate * p20 - a);
  sums[DP] += p * dp;
  sums[C] += p * (ddp - dp);
}

/* Above the table: Sommerfeld's series, by the recurrence of docs/guide/fermi-gas.md. D is at fixed mu here, and all
   formulas below hold. */
static void degenerate(double eta, double theta, double *sums) {
  static const double b_k[15] = {/* 2 (1 - 2^(1-2k)) zeta(2k) */
      1.6449340668482264, 1.8940656589944918, 1.9711021825948702, 1.9924660037052957, 1.998079015196543,
      1.9995153702877164, 1.9998783406919594, 1.9999695284298122, 1.9999923757392202, 1.9999980932231631,
      1.9999995232264616, 1.9999998807977848, 1.999999970198464,  1.9999999925495069, 1.9999999981373646};
  double mu = eta * theta, p2 = mu * (mu + 2), p = sqrt(p2), w = p * p2 / 3;
  double x = 2 * (1 + mu) * theta / p2, s = theta * theta / p2;
  double a = 1.5 * x, b = 0.5 * x * a + 3 * s, c = -0.5 * x * b + 4 * s * a; /* a_1, a_2, a_3 */
  double thermal = 0, q = 0, m = 0, n = 1, n10 = a, n01 = 0, cold = 0;
  for (int k = 1; k < 16; k++) {
    double i = 2 * k, coefficient = b_k[k - 1];
    thermal += coefficient * a;
    q += i * coefficient * a;
    m += i * (i - 1) * coefficient * a;
    n += coefficient * b;
    n01 += i * coefficient * b;
    n10 += coefficient * c;
    double d = x * (0.5 - i) * c + s * (3 - i) * (i + 1) * b; /* a_(2k+2) */
    double e = x * (-0.5 - i) * d + s * (2 - i) * (i + 2) * c;
    a = c;
    b = d;
    c = e;
  }
  if (p > 0.6) {
    cold = (p * (1 + mu) * (2 * p2 - 3) + 3 * asinh(p)) / 24;
  } else { /* where that form loses digits */
    double term = p * p2 * p2 / 3;
    for (int k = 0; k < 40; term *= -(k + 0.5) / (k + 1) * p2, k++) cold += term / (2 * k + 5);
  }
  w *= theta;
  sums[P] = cold + w * thermal;
  sums[TN] = w * n;
  sums[TS] = sums[DP] = w * q;
  sums[ENERGY] = w * q - sums[P] + eta * w * n;
  sums[A] = w * n10;
  sums[B] = w * n01;
  sums[C] = w * m;
}

/* ---- the gas ---- */

/* All sums at nu = mu/kT and eta = nu - 1/theta, both given, since either may be small beside the other. */
static void gas_sums(const struct electron_table *table, double nu, double eta, double theta, double *sums) {
  double opposite = -nu - 1 / theta;
  for (int k = 0; k < SUMS; k++) sums[k] = 0;
  if (eta > table->eta[table->rows - 1]) degenerate(eta, theta, sums);
  else add_species(table, eta, theta, 1, 0, sums);
  if (opposite > -740) add_species(table, opposite, theta, -1, 2 / theta, sums);
  if (nu < 1e-5) sums[TN] = nu * sums[A]; /* n_- - n_+ is a small difference here */
}

/* The gas of `density` net electrons per cm^3, above 0, at `temperature` in K. 0, or -1 outside the table and without
   convergence. */
int electron_gas(const struct electron_table *table, double density, double temperature, struct electron_state *state) {
  double theta = temperature / table->rest, n = density / table->density, inverse = 1 / theta, sums[SUMS];
  double middle = 0.5 * inverse, nu, eta, last = INFINITY, y = log(theta);
  if (!(density > 0 && y >= table->y[0] && y <= table->y[table->columns - 1])) return -1;
  gas_sums(table, middle, -middle, theta, sums);
  /* With pairs the unknown is ln nu, in which ln n is convex, else eta, in which it is concave: Newton's method converges
     from above in the one and from below in the other. */
  int pairs = n * theta < sums[TN];
  if (pairs) {
    gas_sums(table, 0, -inverse, theta, sums);
    nu = fmin(middle, n * theta / sums[A]);
    eta = nu - inverse;
  } else {
    double classical[SUMS] = {0}; /* its eta lies below the true one */
    add_species(table, table->eta[0], theta, 1, 0, classical);
    eta = fmax(-middle, table->eta[0] + log(n * theta / classical[TN]));
    nu = eta + inverse;
  }
  for (int round = 0; round < 200; round++) {
    gas_sums(table, nu, eta, theta, sums);
    double ratio = log(n * theta / sums[TN]) * sums[TN] / sums[A]; /* the step in eta */
    if (pairs) {
      nu *= exp(fmin(ratio / nu, 3));
      eta = nu - inverse;
    } else {
      eta += ratio;
      nu = eta + inverse;
    }
    double size = fabs(ratio) / fmax(pairs ? nu : 1, fabs(eta));
    if (size < 4e-16 || (size < 1e-10 && size >= last)) break;
    if (round == 199) return -1;
    last = size;
  }
  gas_sums(table, nu, eta, theta, sums);
  double slope = sums[B] / sums[A];
  *state = (struct electron_state){
      .pressure = table->pressure * sums[P],
      .entropy = table->pressure * sums[TS] / temperature,
      .energy = table->pressure * sums[ENERGY],
      .heat_capacity = table->pressure * (sums[C] - sums[B] * slope) / temperature,
      .pressure_by_density = table->pressure / table->density * theta * n * theta / sums[A],
      .pressure_by_temperature = table->pressure * (sums[DP] - n * theta * slope) / temperature,
      .eta = eta,
      .positrons = table->density * sums[TPLUS] / theta};
  return 0;
}

#ifndef ELECTRON_TABLE_NO_MAIN
int main(int count, char **words) {
  struct electron_table table;
  struct electron_state state;
  if (count < 4 || electron_table_read(words[1], &table) != 0) {
    fprintf(stderr, "usage: %s electrons.npz DENSITY TEMPERATURE ...: net electrons per cm^3, K\n", words[0]);
    return 2;
  }
  puts("pressure entropy energy heat_capacity pressure_by_density pressure_by_temperature eta positrons");
  for (int k = 2; k + 1 < count; k += 2) {
    if (electron_gas(&table, atof(words[k]), atof(words[k + 1]), &state) != 0) {
      fprintf(stderr, "%s per cm^3 and %s K: outside the table\n", words[k], words[k + 1]);
      return 1;
    }
    printf("%.17g %.17g %.17g %.17g ", state.pressure, state.entropy, state.energy, state.heat_capacity);
    printf("%.17g %.17g %.17g %.17g\n", state.pressure_by_density, state.pressure_by_temperature, state.eta, state.positrons);
  }
  return 0;
}
#endif
