/* Barycentric times and velocity corrections by a plain loop over ERFA.
 *
 * Usage: erfa_rows full|short  <stamps
 *
 * Reads UTC Julian dates in two parts, one row a line, for the star and the
 * site written below; prints nanoseconds a row of the loop alone, the mean of
 * BJD_TDB minus the stamp in seconds, and the mean velocity correction in m/s.
 * "full" takes the IAU 2000A nutation, "short" IAU 2000B. UT1 = UTC, no polar
 * motion, no Shapiro term.
 *
 * Build: gcc -O2 -o erfa_rows erfa_rows.c -l:liberfa.so.1 -lm
 * The few prototypes are declared here so that the run-time library is enough.
 */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

int eraUtctai(double, double, double *, double *);
int eraTaitt(double, double, double *, double *);
int eraUtcut1(double, double, double, double *, double *);
double eraDtdb(double, double, double, double, double, double);
int eraEpv00(double, double, double[2][3], double[2][3]);
void eraC2i06a(double, double, double[3][3]);
void eraC2i00b(double, double, double[3][3]);
double eraEra00(double, double);
void eraPvtob(double, double, double, double, double, double, double, double[2][3]);
void eraTrxpv(double[3][3], double[2][3], double[2][3]);
int eraPmsafe(double, double, double, double, double, double, double, double, double, double,
              double *, double *, double *, double *, double *, double *);

#define AU 149597870700.0
#define C 299792458.0
#define DEG (M_PI / 180)
#define MAS (DEG / 3600e3)

/* The star and the site of the Go benchmark. */
static const double ra = 270 * DEG, dec = 5 * DEG, pm_ra = -800 * MAS, pm_dec = 10300 * MAS, parallax = 0.5;
static const double longitude = -70.7 * DEG, latitude = -30.2 * DEG, height = 2500;

static double seconds(void)
{
    struct timespec t;
    clock_gettime(CLOCK_MONOTONIC, &t);
    return t.tv_sec + 1e-9 * t.tv_nsec;
}

static void row(double day, double frac, int full, double *light_s, double *velocity_ms)
{
    double tai1, tai2, tt1, tt2, ut1, ut2, helio[2][3], bary[2][3], to_date[3][3], site[2][3], icrs[2][3];
    double r, d, pr, pd, px, rv, k[3], along = 0, square = 0, across = 0, v2 = 0, sun2 = 0, vk = 0;

    eraUtctai(day, frac, &tai1, &tai2);
    eraTaitt(tai1, tai2, &tt1, &tt2);
    eraUtcut1(day, frac, 0, &ut1, &ut2);
    double u = hypot(6378.137 * cos(latitude), 0), v = 6356.752 * sin(latitude);
    double tdb_tt = eraDtdb(tt1, tt2, fmod(ut2 + 10.5, 1), longitude, u, v);
    double tdb2 = tt2 + tdb_tt / 86400;
    eraEpv00(tt1, tdb2, helio, bary);
    if (full) eraC2i06a(tt1, tt2, to_date); else eraC2i00b(tt1, tt2, to_date);
    eraPvtob(longitude, latitude, height, 0, 0, 0, eraEra00(ut1, ut2), site);
    eraTrxpv(to_date, site, icrs);
    eraPmsafe(ra, dec, pm_ra / cos(dec), pm_dec, parallax, 0, 2451545, 0, tt1, tdb2, &r, &d, &pr, &pd, &px, &rv);
    k[0] = cos(d) * cos(r); k[1] = cos(d) * sin(r); k[2] = sin(d);
    for (int i = 0; i < 3; i++) {
        double place = bary[0][i] * AU + icrs[0][i], speed = bary[1][i] * AU / 86400 + icrs[1][i];
        along += place * k[i];
        square += place * place;
        v2 += speed * speed;
        vk += speed * k[i];
        sun2 += (helio[0][i] * AU + icrs[0][i]) * (helio[0][i] * AU + icrs[0][i]);
    }
    across = square - along * along;
    *light_s = ((tt1 - day) + (tt2 - frac)) * 86400 + tdb_tt + along / C - across * px * DEG / 3600 / AU / (2 * C);
    double potential = (1.3271244e20 / sqrt(sun2) + 3.986004418e14 / 6.375e6) / (C * C);
    *velocity_ms = C * ((1 + vk / C) / sqrt(1 - v2 / (C * C)) / (1 - potential) - 1);
}

int main(int argc, char **argv)
{
    int full = argc > 1 && strcmp(argv[1], "full") == 0, n = 0, room = 1 << 16;
    double *stamps = malloc(2 * room * sizeof *stamps), light = 0, velocity = 0, l, v;
    while (scanf("%lf %lf", &stamps[2 * n], &stamps[2 * n + 1]) == 2)
        if (++n == room) stamps = realloc(stamps, 2 * (room *= 2) * sizeof *stamps);
    double start = seconds();
    for (int i = 0; i < n; i++) {
        row(stamps[2 * i], stamps[2 * i + 1], full, &l, &v);
        light += l;
        velocity += v;
    }
    printf("%.1f %.9f %.6f\n", (seconds() - start) / n * 1e9, light / n, velocity / n);
    return 0;
}
