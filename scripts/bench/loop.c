/* The loop of scripts/bench.ts by hand: pendulum on a cart, all states measured, prediction over one period, state feedback,
 * hold on loss, Cash and Karp's pair with tolerance 1e-8. No recording, no figures. Reads "rounds repeats", then phi (4 x 4),
 * gamma (4), K (4), then "measurement command" delivered (1) or lost (0) for each round; prints the best time of a run in
 * microseconds and the state at the end. */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

static const double M = 1.2, m = 0.15, l = 0.35, I = 0.006, b = 0.4, c = 0.002, g = 9.81, T = 0.02;
static double phi[16], gam[4], K[4], u;

static void rhs(double *dx, const double *x) {
  const double J = I + m * l * l, ml = m * l, s = sin(x[1]), co = cos(x[1]), mc = ml * co, D = (M + m) * J - mc * mc;
  const double f = u - b * x[2] + ml * s * x[3] * x[3], q = ml * g * s - c * x[3];
  dx[0] = x[2];
  dx[1] = x[3];
  dx[2] = (J * f - mc * q) / D;
  dx[3] = ((M + m) * q - mc * f) / D;
}

static void integrate(double *y, double span, double *h) {
  double k1[4], k2[4], k3[4], k4[4], k5[4], k6[4], w[4], t = 0;
  while (t < span * (1 - 1e-12)) {
    double dt = fmin(*h, span - t);
    rhs(k1, y);
    for (;;) {
      double e = 0;
      for (int i = 0; i < 4; i++) w[i] = y[i] + dt * 0.2 * k1[i];
      rhs(k2, w);
      for (int i = 0; i < 4; i++) w[i] = y[i] + dt * (0.075 * k1[i] + 0.225 * k2[i]);
      rhs(k3, w);
      for (int i = 0; i < 4; i++) w[i] = y[i] + dt * (0.3 * k1[i] - 0.9 * k2[i] + 1.2 * k3[i]);
      rhs(k4, w);
      for (int i = 0; i < 4; i++) w[i] = y[i] + dt * (-11. / 54 * k1[i] + 2.5 * k2[i] - 70. / 27 * k3[i] + 35. / 27 * k4[i]);
      rhs(k5, w);
      for (int i = 0; i < 4; i++)
        w[i] = y[i] + dt * (1631. / 55296 * k1[i] + 175. / 512 * k2[i] + 575. / 13824 * k3[i] + 44275. / 110592 * k4[i] + 253. / 4096 * k5[i]);
      rhs(k6, w);
      for (int i = 0; i < 4; i++) {
        double d = dt * ((2825. / 27648 - 37. / 378) * k1[i] + (18575. / 48384 - 250. / 621) * k3[i] + (13525. / 55296 - 125. / 594) * k4[i] +
                         277. / 14336 * k5[i] + (0.25 - 512. / 1771) * k6[i]);
        e = fmax(e, fabs(d) / (1e-8 + 1e-8 * fabs(y[i])));
      }
      if (e <= 1) {
        for (int i = 0; i < 4; i++) y[i] += dt * (37. / 378 * k1[i] + 250. / 621 * k3[i] + 125. / 594 * k4[i] + 512. / 1771 * k6[i]);
        t += dt;
        *h = fmin(T / 2, dt * fmin(5, e > 0 ? 0.9 * pow(e, -0.2) : 5));
        break;
      }
      dt *= fmax(0.2, 0.9 * pow(e, -0.25));
    }
  }
}

static void run(int rounds, const char *measured, const char *commanded, double *y) {
  double estimate[4] = {0, 0.08, 0, 0}, prior[4], ahead[4], believed = 0, command = 0, h = T / 2;
  y[0] = y[2] = y[3] = 0;
  y[1] = 0.08;
  u = 0;
  for (int k = 0; k < rounds; k++) {
    if (k > 0 && commanded[k - 1]) u = command;
    for (int i = 0; i < 4; i++) {
      prior[i] = k ? gam[i] * believed : 0;
      for (int j = 0; j < 4; j++) prior[i] += k ? phi[4 * i + j] * estimate[j] : (i == j) * estimate[j];
    }
    for (int i = 0; i < 4; i++) estimate[i] = measured[k] ? y[i] : prior[i];
    believed = command;
    command = 0;
    for (int i = 0; i < 4; i++) {
      ahead[i] = gam[i] * believed;
      for (int j = 0; j < 4; j++) ahead[i] += phi[4 * i + j] * estimate[j];
      command -= K[i] * ahead[i];
    }
    integrate(y, T, &h);
  }
}

int main(void) {
  int rounds, repeats;
  if (scanf("%d %d", &rounds, &repeats) != 2) return 1;
  for (int i = 0; i < 16; i++)
    if (scanf("%lf", &phi[i]) != 1) return 1;
  for (int i = 0; i < 4; i++)
    if (scanf("%lf", &gam[i]) != 1) return 1;
  for (int i = 0; i < 4; i++)
    if (scanf("%lf", &K[i]) != 1) return 1;
  char *measured = malloc(rounds), *commanded = malloc(rounds);
  for (int k = 0; k < rounds; k++) {
    int a, d;
    if (scanf("%d %d", &a, &d) != 2) return 1;
    measured[k] = (char)a;
    commanded[k] = (char)d;
  }
  double y[4], best = 1e300;
  for (int r = 0; r < repeats; r++) {
    struct timespec from, to;
    clock_gettime(CLOCK_MONOTONIC, &from);
    run(rounds, measured, commanded, y);
    clock_gettime(CLOCK_MONOTONIC, &to);
    best = fmin(best, (to.tv_sec - from.tv_sec) * 1e6 + (to.tv_nsec - from.tv_nsec) / 1e3);
  }
  printf("%.3f %.17g %.17g %.17g %.17g\n", best, y[0], y[1], y[2], y[3]);
  return 0;
}
