/*
 * The native side of the benchmark: the library's algorithm in C, for one carbon-oxygen mixture, liquid or crystal.
 *
 * native POINTS COUNT: reads COUNT densities, then COUNT temperatures (doubles) from the file POINTS, and answers bytes
 * on standard input: a letter of `sums` below evaluates the batch and answers its nanoseconds (one double); '?' answers
 * the columns of the last batch.
 */
#define _POSIX_C_SOURCE 199309L
#include <stdio.h>
#include <time.h>
#include "state.h"

/* What a letter evaluates: terms beside the electron gas, and the columns that are written. */
struct sum {
  char letter;
  int full;  /* ions with their Coulomb terms, and radiation */
  int every; /* all columns, not the eight usual ones */
};
static const struct sum sums[] = {{'g', 0, 0}, {'w', 1, 0}, {'a', 1, 1}};
static const int usual[] = {0, 1, 2, 5, 7, 8, 9, 13};

static int evaluate(const struct sum *sum, int count, const double *density, const double *temperature,
                    double **columns, const struct matter *matter) {
  struct gas gas = {0};
  struct point point = {0};
  int slots[QUANTITIES], chosen = 0;
  if (sum->every)
    for (; chosen < QUANTITIES; chosen++) slots[chosen] = chosen;
  else
    for (; chosen < (int)(sizeof usual / sizeof *usual); chosen++) slots[chosen] = usual[chosen];
  for (int i = 0; i < count; i++)
    if (!(density[i] >= 1e-20 && density[i] <= 1e18 && temperature[i] >= 1 && temperature[i] <= 1e13)) return 1;
  for (int i = 0; i < count; i++) {
    struct members members = {0};
    double record[QUANTITIES];
    point.density = density[i];
    point.temperature = temperature[i];
    fill_plasma(&point, matter);
    add_electrons(&members, &point, &gas);
    if (sum->full) {
      add_coulomb(&members, &point, matter);
      add_radiation(&members, &point);
    }
    if (sum->every) {
      find_antiparticles(&gas);
      point.positron_density = gas.antiparticles * ELECTRON_DENSITY_UNIT;
    }
    if (fill_quantities(&point, &members, record)) return 1;
    if (sum->every) fill_plasma_quantities(&point, record);
    for (int j = 0; j < chosen; j++) {
      const double value = record[slots[j]];
      if (value != value) return 1;
      columns[j][i] = value;
    }
  }
  return 0;
}

static double now(void) {
  struct timespec t;
  clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &t);
  return t.tv_sec * 1e9 + t.tv_nsec;
}

int main(int argc, char **argv) {
  if (argc != 3) return 2;
  const int count = atoi(argv[2]);
  double *points = malloc(sizeof(double) * 2 * count);
  FILE *file = fopen(argv[1], "rb");
  if (!file || fread(points, sizeof(double), 2 * count, file) != (size_t)(2 * count)) return 2;
  fclose(file);
  double *columns[QUANTITIES];
  for (int i = 0; i < QUANTITIES; i++) columns[i] = calloc(count, sizeof(double));
  fill_numerics();
  fill_steps();
  fill_series();
  fill_coulomb();
  fill_factors_of_state();
  int written = 0;
  for (int letter; (letter = getchar()) != EOF;) {
    if (letter == '?') {
      for (int j = 0; j < written; j++) fwrite(columns[j], sizeof(double), count, stdout);
    } else {
      for (size_t k = 0; k < sizeof sums / sizeof *sums; k++) {
        if (sums[k].letter != letter) continue;
        const double start = now();
        if (evaluate(&sums[k], count, points, points + count, columns, &carbon_oxygen)) return 3;
        const double time = now() - start;
        written = sums[k].every ? QUANTITIES : (int)(sizeof usual / sizeof *usual);
        fwrite(&time, sizeof time, 1, stdout);
      }
    }
    fflush(stdout);
  }
  return 0;
}
