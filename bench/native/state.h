/* A point to its quantities: src/matter/plasma.ts, the contributions' members, src/thermodynamics/quantities.ts. */
#ifndef STATE_H
#define STATE_H
#include "coulomb.h"
#include "fermi-gas.h"

#define QUANTITIES 33

/* Members of the free energy (src/thermodynamics/free-energy.ts), erg/g. */
struct members {
  double energy, entropy, heat, pressure, pressure_r, pressure_t;
};

/* The record of a point (src/matter/plasma.ts). */
struct point {
  double density, temperature, electron_density, relativity, electron_coupling, ion_coupling, fermi_energy;
  double plasma_temperature_squared, chemical_potential, degeneracy, positron_density, radiation_pressure;
  double crystal_fraction;
};

static double relativity_factor, radius_factor, coupling_factor, plasma_factor, thermal_volume, non_relativistic;

static void fill_factors_of_state(void) {
  const double hbar = REDUCED_PLANCK_CONSTANT, k = BOLTZMANN_CONSTANT, e2 = ELEMENTARY_CHARGE_SQUARED;
  relativity_factor = 3 / ELECTRON_DENSITY_UNIT;
  radius_factor = cbrt(9 * PI / 4) * FINE_STRUCTURE_CONSTANT;
  coupling_factor = e2 / (BOHR_RADIUS * k * radius_factor);
  plasma_factor = hbar / k * (hbar / k) * 4 * PI * e2;
  thermal_volume = pow(2 * PI * hbar * hbar / (ATOMIC_MASS_CONSTANT * k), 1.5);
  non_relativistic = 2 * pow(4 / (9 * PI), 2.0 / 3);
}

static void fill_plasma(struct point *point, const struct matter *matter) {
  const double electrons = point->density * matter->electrons_per_gram;
  const double x = cbrt(electrons * relativity_factor);
  const double coupling = coupling_factor * x / point->temperature;
  point->electron_density = electrons;
  point->relativity = x;
  point->electron_coupling = coupling;
  point->ion_coupling = coupling * matter->coupling_moment;
  point->fermi_energy = x * x / (1 + sqrt(1 + x * x));
  point->plasma_temperature_squared =
      plasma_factor * (point->density * matter->ions_per_gram) * matter->plasma_frequency_sum;
  point->radiation_pressure = 0;
  point->crystal_fraction = 0;
}

static void add_electrons(struct members *members, struct point *point, struct gas *gas) {
  gas->net_density = point->electron_density / ELECTRON_DENSITY_UNIT;
  gas->fermi_momentum = point->relativity;
  gas->kinetic_mu = point->fermi_energy;
  gas->theta = point->temperature / ELECTRON_REST_TEMPERATURE;
  const double unit = ELECTRON_PRESSURE_UNIT / point->density;
  solve_density(gas);
  const double theta = gas->theta, n = gas->n00, inverse = 1 / gas->n10;
  const double a = n * inverse, b = -gas->n01 * inverse;
  const double heat = gas->m12 + gas->n01 * b;
  members->energy += unit * (gas->q + gas->centre * n - gas->p00);
  members->entropy += unit * (gas->q - n * theta * gas->psi);
  members->heat += unit * theta * heat;
  members->pressure += unit * gas->p00;
  members->pressure_r += unit * theta * n * a;
  members->pressure_t += unit * (gas->q + n * theta * b);
  point->chemical_potential = ELECTRON_REST_ENERGY * (gas->centre + theta * gas->psi);
  point->degeneracy = gas->centre == 0 ? gas->psi : gas->psi + gas->centre / theta;
}

static void add_ideal_ions(struct members *members, const struct point *point, const struct matter *matter) {
  const double temperature = point->temperature;
  const double energy = matter->ions_per_gram * BOLTZMANN_CONSTANT * temperature;
  const double volume = thermal_volume / (temperature * sqrt(temperature));
  const double occupation = log(matter->ions_per_gram * point->density * volume);
  members->energy += 1.5 * energy;
  members->entropy += energy * (2.5 - occupation - matter->ion_entropy_constant);
  members->heat += 1.5 * energy;
  members->pressure += energy;
  members->pressure_r += energy;
  members->pressure_t += energy;
}

static void add_coulomb(struct members *members, struct point *point, const struct matter *matter) {
  struct plasma plasma;
  const double x = point->relativity;
  plasma.density = point->density;
  plasma.temperature = point->temperature;
  plasma.x = x;
  plasma.rs = radius_factor / x;
  plasma.cube_root = x / matter->x;
  plasma.root_density = sqrt(point->density);
  plasma.kT = matter->ions_boltzmann * point->temperature;
  plasma.gamma_e = point->electron_coupling;
  plasma.root = plasma.root_density / point->temperature;
  plasma.electron_energy = matter->electrons_boltzmann * matter->gamma_e * plasma.cube_root;
  plasma.t = non_relativistic * plasma.rs / plasma.gamma_e;
  const int crystal = point->ion_coupling >= MELTING_COUPLING && point->density <= matter->crystal_limit;
  point->crystal_fraction = crystal;
  if (!crystal) add_ideal_ions(members, point, matter);
  double f[NATURAL];
  coulomb_terms(f, &plasma, matter, crystal);
  members->energy += f[0] - f[2];
  members->entropy -= f[2];
  members->heat -= f[5];
  members->pressure += f[1];
  members->pressure_r += f[3] + 2 * f[1];
  members->pressure_t += f[4];
}

static void add_radiation(struct members *members, struct point *point) {
  const double square = point->temperature * point->temperature;
  const double pressure = RADIATION_CONSTANT / 3 * square * square, p = pressure / point->density;
  point->radiation_pressure = pressure;
  members->energy += 3 * p;
  members->entropy += 4 * p;
  members->heat += 12 * p;
  members->pressure += p;
  members->pressure_t += 4 * p;
}

/* 0 where the sum is stable. */
static int fill_quantities(const struct point *point, const struct members *members, double *out) {
  const double density = point->density, compressibility = members->pressure_r, thermal = members->pressure_t;
  const double specific_pressure = members->pressure, heat = members->heat, energy = members->energy;
  const double grueneisen = heat > 0 ? thermal / heat : 0;
  const double adiabatic = compressibility + thermal * grueneisen;
  if (!(specific_pressure > 0 && compressibility >= 0 && adiabatic > 0 && heat >= 0 && isfinite(energy))) return 1;
  const double per_pressure = 1 / specific_pressure, per_density = 1 / density;
  const double per_temperature = 1 / point->temperature;
  const double gamma1 = adiabatic * per_pressure, gradient = grueneisen / gamma1;
  const double heat_capacity = heat * per_temperature;
  out[0] = specific_pressure * density;
  out[1] = energy;
  out[2] = members->entropy * per_temperature;
  out[3] = energy - members->entropy;
  out[4] = energy + specific_pressure;
  out[5] = heat_capacity;
  out[6] = heat_capacity * adiabatic / compressibility;
  out[7] = compressibility * per_pressure;
  out[8] = thermal * per_pressure;
  out[9] = gamma1;
  out[10] = 1 / (1 - gradient);
  out[11] = 1 + grueneisen;
  out[12] = gradient;
  out[13] = sqrt(adiabatic / (1 + (energy + specific_pressure) * (1 / (SPEED_OF_LIGHT * SPEED_OF_LIGHT))));
  out[14] = adiabatic * density;
  out[15] = compressibility;
  out[16] = thermal * density * per_temperature;
  out[17] = (specific_pressure - thermal) * per_density;
  out[18] = heat_capacity;
  out[19] = -thermal * per_density * per_temperature;
  out[20] = heat_capacity * per_temperature;
  return 0;
}

static void fill_plasma_quantities(const struct point *point, double *out) {
  const double x = point->relativity;
  out[21] = point->electron_density;
  out[22] = point->chemical_potential;
  out[23] = point->degeneracy;
  out[24] = point->positron_density;
  out[25] = point->radiation_pressure / out[0];
  out[26] = x;
  out[27] = radius_factor / x;
  out[28] = point->electron_coupling;
  out[29] = point->ion_coupling;
  out[30] = point->fermi_energy * ELECTRON_REST_TEMPERATURE;
  out[31] = sqrt(point->plasma_temperature_squared);
  out[32] = point->crystal_fraction;
}

#endif
