/* Electrons and positrons, any composition, from a table of fermistate in an .npz file. C99, no library; for
   little-endian machines.

       cc -O2 electron_table.c -o electron_table -lm
       ./electron_table electrons.npz                                 checks the file, tells what it holds
       ./electron_table electrons.npz 3.0110703768336843e25 1e9       net electrons per cm^3, temperature in K

   In a program of your own compile with -D ELECTRON_TABLE_NO_MAIN, call electron_table_read once and electron_gas at
   each point. docs/guide/electron-table.md of fermistate has the formulas and the errors. */
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* Net electrons per cm^3: about 1e-20 to 1e18 g/cm^3, the domain of the library's own gas. */
#define LOWEST_DENSITY 1e3
#define HIGHEST_DENSITY 1e42

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

/* Why a function gave no answer; electron_table_reason has the words. */
enum {
  ELECTRON_UNREADABLE = -1,
  ELECTRON_NO_ARCHIVE = -2,
  ELECTRON_DAMAGED = -3,
  ELECTRON_NO_TABLE = -4,
  ELECTRON_DENSITY = -5,
  ELECTRON_TEMPERATURE = -6,
  ELECTRON_NO_CONVERGENCE = -7
};

const char *electron_table_reason(int error) {
  static const char *const reasons[8] = {"no error",
                                         "it cannot be read",
                                         "it is no .npz file",
                                         "it is cut or damaged",
                                         "it is no electron table of layout 2",
                                         "the density is not within 1e3 to 1e42 per cm^3",
                                         "the temperature is outside the table",
                                         "no convergence"};
  return error > 0 || error < -7 ? "unknown error" : reasons[-error];
}

static uint32_t number(const unsigned char *at, int bytes) {
  uint32_t value = 0;
  while (bytes--) value = value << 8 | at[bytes];
  return value;
}

/* CRC-32 of ISO 3309 (reflected polynomial), as in the headers of the archive. */
static uint32_t crc_32(const unsigned char *at, size_t length) {
  uint32_t table[256], sum = 0xffffffff;
  for (uint32_t k = 0; k < 256; k++) {
    table[k] = k;
    for (int bit = 0; bit < 8; bit++) table[k] = table[k] >> 1 ^ (table[k] & 1 ? 0xedb88320 : 0);
  }
  for (; length > 0; length--) sum = sum >> 8 ^ table[(sum ^ *at++) & 0xff];
  return ~sum;
}

enum { HEADER = 30, ENTRY = 46, END = 22 }; /* bytes of an archive's records without names */

/* A member: its name, and its .npy bytes with the sum that its header states. */
struct member {
  const unsigned char *name, *data;
  size_t letters, size, end; /* end: place of what follows in the file */
  uint32_t sum;
};

/* The member at a place of the file. 0, or -1 where none lies there, or one that is packed. */
static int member_at(const unsigned char *file, size_t length, size_t at, struct member *found) {
  const unsigned char *head = file + at;
  if (length - at < HEADER || number(head, 4) != 0x04034b50) return -1;
  size_t size = number(head + 18, 4), letters = number(head + 26, 2), before = HEADER + letters + number(head + 28, 2);
  if (before > length - at || size > length - at - before) return -1;
  if (number(head + 8, 2) != 0 || number(head + 22, 4) != size) return -1;
  *found = (struct member){head + HEADER, head + before, letters, size, at + before + size,
                           number(head + 14, 4)};
  return 0;
}

/* Whether the file is whole: members that have their sums, then a directory of as many, then its end. */
static int is_whole(const unsigned char *file, size_t length) {
  struct member one;
  size_t at = 0, directory, count = 0;
  for (; at < length && number(file + at, 4) == 0x04034b50; at = one.end, count++) {
    if (member_at(file, length, at, &one) != 0 || length - one.end < END) return 0;
    if (crc_32(one.data, one.size) != one.sum) return 0;
  }
  directory = at;
  for (size_t k = 0; k < count; k++) {
    const unsigned char *entry = file + at;
    if (length - at < ENTRY + END || number(entry, 4) != 0x02014b50) return 0;
    size_t size = ENTRY + number(entry + 28, 2) + number(entry + 30, 2) + number(entry + 32, 2);
    if (size > length - at - END) return 0;
    at += size;
  }
  const unsigned char *end = file + at;
  return length - at == END && number(end, 4) == 0x06054b50 && number(end + 10, 2) == count &&
         number(end + 12, 4) == at - directory && number(end + 16, 4) == directory;
}

/* The doubles of a member of a whole file; their number into `count`. NULL where there is none. */
static double *doubles(const unsigned char *file, size_t length, const char *name, int *count) {
  static const char start[] = "{'descr': '<f8', 'fortran_order': False,";
  struct member one;
  for (size_t at = 0; member_at(file, length, at, &one) == 0; at = one.end) {
    if (one.letters != strlen(name) || memcmp(one.name, name, one.letters) != 0) continue;
    if (one.size < 10 + sizeof start || memcmp(one.data, "\x93NUMPY\x01", 8) != 0) return NULL;
    size_t head = 10 + number(one.data + 8, 2); /* format 1.0 of .npy */
    if (head > one.size || memcmp(one.data + 10, start, sizeof start - 1) != 0) return NULL;
    double *values = malloc(one.size - head + 1);
    if (values == NULL) return NULL;
    memcpy(values, one.data + head, one.size - head);
    *count = (int)((one.size - head) / sizeof(double));
    return values;
  }
  return NULL;
}

/* All bytes of a file, their number into `length`. NULL where it cannot be read. */
static unsigned char *bytes_of(const char *path, size_t *length) {
  FILE *file = fopen(path, "rb");
  if (file == NULL) return NULL;
  long size = fseek(file, 0, SEEK_END) == 0 ? ftell(file) : -1;
  unsigned char *bytes = size >= 0 && size < INT32_MAX ? malloc((size_t)size + END) : NULL;
  rewind(file);
  if (bytes != NULL && fread(bytes, 1, (size_t)size, file) != (size_t)size) {
    free(bytes);
    bytes = NULL;
  }
  fclose(file);
  *length = (size_t)size;
  return bytes;
}

/* 0, or why the file was refused: ELECTRON_UNREADABLE, _NO_ARCHIVE, _DAMAGED, _NO_TABLE. */
int electron_table_read(const char *path, struct electron_table *table) {
  static const char *const names[7] = {"axes.degeneracy.npy",        "axes.log_theta.npy", "surface.nodes.npy",
                                       "units.rest_temperature.npy", "units.pressure.npy", "units.density.npy",
                                       "format.electron_table_layout.npy"};
  size_t length;
  unsigned char *bytes = bytes_of(path, &length);
  if (bytes == NULL) return ELECTRON_UNREADABLE;
  int error = length < 4 || number(bytes, 4) != 0x04034b50 ? ELECTRON_NO_ARCHIVE : 0;
  if (error == 0 && !is_whole(bytes, length)) error = ELECTRON_DAMAGED;
  double *found[7] = {0};
  int counts[7] = {0};
  for (int k = 0; error == 0 && k < 7; k++) {
    found[k] = doubles(bytes, length, names[k], &counts[k]);
    if (found[k] == NULL || counts[k] < (k < 2 ? 2 : 1)) error = ELECTRON_NO_TABLE;
  }
  free(bytes);
  if (error == 0 && (counts[2] != 49 * counts[0] * counts[1] || *found[6] != 2)) error = ELECTRON_NO_TABLE;
  if (error == 0)
    *table = (struct electron_table){counts[0], counts[1], found[0],  found[1],
                                     found[2],  *found[3], *found[4], *found[5]};
  for (int k = error == 0 ? 3 : 0; k < 7; k++) free(found[k]);
  return error;
}

void electron_table_free(struct electron_table *table) {
  free(table->eta);
  free(table->y);
  free(table->nodes);
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

/* 0, or ELECTRON_DENSITY, ELECTRON_TEMPERATURE. */
static int refusal(const struct electron_table *table, double density, double temperature) {
  if (!(density >= LOWEST_DENSITY && density <= HIGHEST_DENSITY)) return ELECTRON_DENSITY;
  double y = log(temperature / table->rest);
  return y >= table->y[0] && y <= table->y[table->columns - 1] ? 0 : ELECTRON_TEMPERATURE;
}

/* The gas of `density` net electrons per cm^3, 1e3 to 1e42, at `temperature` in K. 0, or why not: ELECTRON_DENSITY,
   ELECTRON_TEMPERATURE, ELECTRON_NO_CONVERGENCE. */
int electron_gas(const struct electron_table *table, double density, double temperature, struct electron_state *state) {
  double theta = temperature / table->rest, n = density / table->density, inverse = 1 / theta, sums[SUMS];
  double middle = 0.5 * inverse, nu, eta, last = INFINITY;
  int error = refusal(table, density, temperature);
  if (error != 0) return error;
  gas_sums(table, middle, -middle, theta, sums);
  /* With pairs the unknown is ln nu, in which ln n is convex, else eta, in which it is concave: Newton's method
     converges from above in the one and from below in the other. */
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
    if (round == 199) return ELECTRON_NO_CONVERGENCE;
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
static int refuse(const char *argument, const char *given, const char *allowed) {
  fprintf(stderr, "%s: given %s; allowed: %s\n", argument, given, allowed);
  return 1;
}

/* Whether a word is a finite number, and that number. */
static int read_number(const char *word, double *value) {
  char *end;
  *value = strtod(word, &end);
  return end != word && *end == 0 && isfinite(*value);
}

int main(int count, char **words) {
  static struct electron_table table;
  struct electron_state state;
  char text[400], range[80];
  if (count < 2)
    return refuse("arguments", "none", "electrons.npz [DENSITY TEMPERATURE]...: net electrons per cm^3, K");
  int error = electron_table_read(words[1], &table);
  if (error != 0) {
    snprintf(text, sizeof text, "%s, and %s", words[1], electron_table_reason(error));
    return refuse("file", text, "an electron table as speciesTableToNpz of fermistate writes it");
  }
  double lowest = table.rest * exp(table.y[0]), highest = table.rest * exp(table.y[table.columns - 1]);
  snprintf(range, sizeof range, "%.4g to %.4g K", lowest, highest);
  if (count == 2) printf("%d x %d nodes, %s\n", table.rows, table.columns, range);
  else if (count % 2 != 0) return refuse("temperature", "none", "one after each density");
  for (int k = 2; k < count; k += 2) { /* all of them before the first line of numbers */
    double density, temperature;
    if (!read_number(words[k], &density)) error = ELECTRON_DENSITY;
    else if (!read_number(words[k + 1], &temperature)) error = ELECTRON_TEMPERATURE;
    else error = refusal(&table, density, temperature);
    if (error == ELECTRON_DENSITY) return refuse("density", words[k], "1e3 to 1e42 net electrons per cm^3");
    if (error == ELECTRON_TEMPERATURE) return refuse("temperature", words[k + 1], range);
  }
  if (count > 2)
    puts("pressure entropy energy heat_capacity pressure_by_density pressure_by_temperature eta positrons");
  for (int k = 2; k < count; k += 2) {
    error = electron_gas(&table, strtod(words[k], NULL), strtod(words[k + 1], NULL), &state);
    if (error != 0) {
      fprintf(stderr, "%s per cm^3 and %s K: %s\n", words[k], words[k + 1], electron_table_reason(error));
      return 1;
    }
    printf("%.17g %.17g %.17g %.17g ", state.pressure, state.entropy, state.energy, state.heat_capacity);
    printf("%.17g %.17g ", state.pressure_by_density, state.pressure_by_temperature);
    printf("%.17g %.17g\n", state.eta, state.positrons);
  }
  return 0;
}
#endif
