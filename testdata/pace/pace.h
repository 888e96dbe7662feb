// What the four programs share: the command line, the clock and the sums that
// keep a compiler from leaving work out.
//
// As built by default a program notes both Birkhoff coordinates of each
// bounce, as a phase portrait needs them. With -DPLACES it notes the place
// and p alone, and computes no arclength.
#define _GNU_SOURCE // sincos
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

// Rounding makes the speed drift where it is not brought back to 1: by one step
// of Newton's method for the inverse root.
#define UNIT(vx, vy) do { double k_ = 1.5 - 0.5 * ((vx) * (vx) + (vy) * (vy)); (vx) *= k_, (vy) *= k_; } while (0)

struct sums { double place, s, p; };

#ifdef PLACES
#define SECTION(set)
#define NOTE(sum, x, y, s, q) ((sum)->place += (x) + (y), (sum)->p += (q) * (q))
#else
#define SECTION(set) set
#define NOTE(sum, x, y, t, q) ((sum)->place += (x) + (y), (sum)->s += (t), (sum)->p += (q) * (q))
#endif

static void run(long n, double s, double p, struct sums *sum);

// Arguments: bounces, s, p. Prints the nanoseconds of processor time a bounce and the means of what
// was noted.
int main(int argc, char **argv) {
    if (argc != 4) return 2;
    long n = atol(argv[1]);
    struct sums sum = {0, 0, 0};
    struct timespec a, b;
    clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &a);
    run(n, atof(argv[2]), atof(argv[3]), &sum);
    clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &b);
    double ns = 1e9 * (b.tv_sec - a.tv_sec) + (b.tv_nsec - a.tv_nsec);
    printf("%.4f %.9g %.9g %.9g\n", ns / n, sum.place / n, sum.s / n, sum.p / n);
    return 0;
}
