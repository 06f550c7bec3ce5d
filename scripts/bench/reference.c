/* The closed loop of the bench in plain C: one vehicle, PI at a fixed sample time, classical RK4, one step a sample.
 *
 *   m_e dv/dt = F(x, v) - 1/2 rho CdA (v + w)|v + w| - m (c0 g cos + g sin),   ds/dt = v
 *   F(x, v) = -Fct + x (min(Fpeak, Ppeak / v) + Fct),   x follows the command with a first-order lag (exact per step)
 *
 * Integrates the energies beside the state and keeps a record by bin, as the program under test does.
 * usage: reference ROAD.bin REPEATS ; ROAD.bin: 16 parameters, then n rows of station, g sin, g cos, headwind (doubles).
 */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

static double par[16];
static double *table;
static long rows;

typedef struct {
  double v, s, drive, aero, roll, climb;
} State;

static inline void slope(const State *y, double x, const double *row, double *d) {
  const double mass = par[0], me = par[1], half = par[2], c0 = par[3];
  const double fct = par[4], fpeak = par[5], ppeak = par[6];
  const double share = (y->s - row[0]) / (row[4] - row[0]);
  const double gs = row[1] + share * (row[5] - row[1]);
  const double gc = row[2] + share * (row[6] - row[2]);
  const double w = row[3] + share * (row[7] - row[3]);
  const double cap = ppeak / y->v;
  const double f = -fct + x * ((cap < fpeak ? cap : fpeak) + fct);
  const double air = y->v + w;
  const double aero = half * air * fabs(air);
  const double roll = mass * c0 * gc;
  const double climb = mass * gs;
  d[0] = (f - aero - roll - climb) / me;
  d[1] = y->v;
  d[2] = f * y->v;
  d[3] = aero * y->v;
  d[4] = roll * y->v;
  d[5] = climb * y->v;
}

static double run(double *bins, long bin_count, double *v_end, long *ticks_out) {
  const double dt = par[7], kp = par[8], ki = par[9], kaw = par[10], set = par[11], lag = par[12], bin = par[13];
  const double keep_full = exp(-dt / lag), keep_half = exp(-0.5 * dt / lag);
  const double end = table[4 * (rows - 1)];
  State y = {par[14], 0, 0, 0, 0, 0};
  double x = par[15], integral = par[15];
  long cursor = 0, ticks = 0;
  double k1[6], k2[6], k3[6], k4[6];
  memset(bins, 0, sizeof(double) * 8 * (size_t)bin_count);
  while (y.s < end) {
    const double e = set - y.v;
    const double u = kp * e + integral;
    const double limited = u > 1 ? 1 : u < 0 ? 0 : u;
    integral += dt * (ki * e + kaw * (limited - u));
    while (cursor < rows - 2 && y.s >= table[4 * (cursor + 1)]) cursor++;
    const double *row = table + 4 * cursor;
    double *b = bins + 8 * (long)(y.s / bin);
    b[0] += dt;
    b[1] += y.v * dt;
    b[2] += e * dt;
    b[3] += e * e * dt;
    if (e > b[4]) b[4] = e;
    if (e < b[5]) b[5] = e;
    b[6] += x * dt;
    b[7] += limited != u ? dt : 0;
    const double half_x = limited + (x - limited) * keep_half;
    const double full_x = limited + (x - limited) * keep_full;
    State z;
    slope(&y, x, row, k1);
#define STEP(k, h) \
  z.v = y.v + (h) * k[0]; \
  z.s = y.s + (h) * k[1];
    STEP(k1, 0.5 * dt) slope(&z, half_x, row, k2);
    STEP(k2, 0.5 * dt) slope(&z, half_x, row, k3);
    STEP(k3, dt) slope(&z, full_x, row, k4);
    double *q = (double *)&y;
    for (int i = 0; i < 6; i++) q[i] += dt / 6 * (k1[i] + 2 * k2[i] + 2 * k3[i] + k4[i]);
    x = full_x;
    ticks++;
  }
  *v_end = y.v;
  *ticks_out = ticks;
  return y.drive;
}

int main(int argc, char **argv) {
  if (argc < 3) return 2;
  FILE *f = fopen(argv[1], "rb");
  if (!f) return 2;
  fseek(f, 0, SEEK_END);
  const long size = ftell(f);
  rewind(f);
  rows = (size - (long)sizeof par) / 32;
  table = malloc((size_t)rows * 32);
  if (fread(par, sizeof par, 1, f) != 1 || fread(table, 32, (size_t)rows, f) != (size_t)rows) return 2;
  fclose(f);
  const long bin_count = (long)(table[4 * (rows - 1)] / par[13]) + 2;
  double *bins = malloc(sizeof(double) * 8 * (size_t)bin_count);
  const int repeats = atoi(argv[2]);
  double v = 0, drive = 0;
  long ticks = 0;
  const clock_t start = clock();
  for (int i = 0; i < repeats; i++) drive = run(bins, bin_count, &v, &ticks);
  const double seconds = (double)(clock() - start) / CLOCKS_PER_SEC / repeats;
  printf("{\"seconds\": %.9g, \"ticks\": %ld, \"speed\": %.17g, \"drive\": %.17g}\n", seconds, ticks, v, drive);
  return 0;
}
