// The limaçon r = 1 + eps cos phi with eps = 0.43, convex, written for this one
// shape. The wall's signed distance from the ray's line, divided by
// sin((t - t0)/2), has one zero; Newton's method finds it, held to a bracket.
#include "pace.h"

static const double eps = 0.43;

// Arclength from phi = 0, by Simpson's rule into a table at the start; in
// between by a cubic with the exact slope, the speed of the curve.
enum { CELLS = 1024 };
static double arc[CELLS + 1];

static double speed(double t) { return sqrt(1 + 2 * eps * cos(t) + eps * eps); }

static void prepare(void) {
    const double h = 2 * M_PI / CELLS;
    for (int i = 0; i < CELLS; i++)
        arc[i + 1] = arc[i] + h / 6 * (speed(i * h) + 4 * speed((i + 0.5) * h) + speed((i + 1) * h));
}

static double length(double t) {
    const double h = 2 * M_PI / CELLS;
    int i = (int)(t / h);
    if (i < 0) i = 0;
    if (i >= CELLS) i = CELLS - 1;
    double u = t / h - i, a = arc[i], d = arc[i + 1] - a;
    double v0 = h * speed(i * h) - d, v1 = d - h * speed((i + 1) * h);
    return a + u * d + u * (1 - u) * (v0 * (1 - u) + v1 * u);
}

static void run(long n, double s, double p, struct sums *sum) {
    prepare();
    double t0 = 0, lo = 0, hi = 2 * M_PI;
    while (hi - lo > 1e-15 * 4) { // the parameter at s
        t0 = 0.5 * (lo + hi);
        if (length(t0) < s) lo = t0; else hi = t0;
        if (t0 == lo && t0 == hi) break;
        if (0.5 * (lo + hi) == lo || 0.5 * (lo + hi) == hi) break;
    }
    double c = cos(t0), q = sin(t0), r = 1 + eps * c;
    double x = r * c, y = r * q;
    double tx = -eps * q * c - r * q, ty = -eps * q * q + r * c, k = 1 / sqrt(tx * tx + ty * ty);
    tx *= k, ty *= k;
    double w = sqrt(1 - p * p), vx = p * tx - w * ty, vy = p * ty + w * tx;
    for (long i = 0; i < n; i++) {
        // Between t0 and t0 + 2 pi, where the distance begins negative. With h
        // half the way one sine and cosine serve the curve and the divisor.
        double c0 = c, q0 = q, lo = 0, hi = M_PI, h = acos(p), f, df;
        for (int j = 0; j < 100; j++) {
            double sh, ch;
            sincos(h, &sh, &ch);
            double s2 = 2 * sh * ch, c2 = 1 - 2 * sh * sh;
            c = c0 * c2 - q0 * s2, q = q0 * c2 + c0 * s2, r = 1 + eps * c;
            tx = -eps * q * c - r * q, ty = -eps * q * q + r * c;
            f = vx * (r * q - y) - vy * (r * c - x), df = vx * ty - vy * tx;
            if (f < 0) lo = h; else hi = h;
            double step = 0.5 * f * sh / (df * sh - 0.5 * f * ch), next = h - step;
            if (fabs(step) < 1e-9) { h = next; break; } // what is left is its square
            if (!(next > lo && next < hi)) next = 0.5 * (lo + hi);
            h = next;
        }
        double t = t0 + 2 * h;
        sincos(t, &q, &c);
        r = 1 + eps * c;
        tx = -eps * q * c - r * q, ty = -eps * q * q + r * c;
        t0 = t >= 2 * M_PI ? t - 2 * M_PI : t;
        x = r * c, y = r * q;
        k = 1 / sqrt(tx * tx + ty * ty);
        tx *= k, ty *= k;
        p = vx * tx + vy * ty;
        w = vx * ty - vy * tx; // to the wall from inside
        vx = p * tx - w * ty, vy = p * ty + w * tx;
        SECTION(s = length(t0);)
        NOTE(sum, x, y, s, p);
    }
}
