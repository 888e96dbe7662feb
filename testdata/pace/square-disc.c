// The square of side 2 about the origin with a disc of radius 0.5 in its
// middle, written for this one shape.
#include "pace.h"

static void run(long n, double s, double p, struct sums *sum) {
    const double a = 1, R = 0.5;
    double x = -a + s, y = -a, vx = p, vy = sqrt(1 - p * p); // s on the bottom side
    for (long i = 0; i < n; i++) {
        double b = x * vx + y * vy, k = x * x + y * y - R * R, disc = b * b - k;
        if (b < 0 && disc > 0 && k > 1e-12) {
            double t = -b - sqrt(disc);
            x += t * vx, y += t * vy;
            double nx = x / R, ny = y / R, vn = vx * nx + vy * ny;
            vx -= 2 * vn * nx, vy -= 2 * vn * ny;
            UNIT(vx, vy);
            p = vx * ny - vy * nx;
            SECTION(double f = atan2(ny, nx); s = 8 * a + R * (f <= 0 ? -f : 2 * M_PI - f);)
        } else {
            double tx = ((vx > 0 ? a : -a) - x) / vx, ty = ((vy > 0 ? a : -a) - y) / vy;
            if (tx < ty) {
                x = vx > 0 ? a : -a, y += tx * vy;
                p = vx > 0 ? vy : -vy;
                vx = -vx;
                SECTION(s = x > 0 ? 2 * a + (y + a) : 6 * a + (a - y);)
            } else {
                y = vy > 0 ? a : -a, x += ty * vx;
                p = vy > 0 ? -vx : vx;
                vy = -vy;
                SECTION(s = y < 0 ? x + a : 4 * a + (a - x);)
            }
        }
        NOTE(sum, x, y, s, p);
    }
}
