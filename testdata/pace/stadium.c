// The stadium, half-length 1 and radius 1, written for this one shape.
#include "pace.h"

static void run(long n, double s, double p, struct sums *sum) {
    const double a = 1, R = 1;
    double x = -a + s, y = -R, vx = p, vy = sqrt(1 - p * p); // s on the bottom side
    int on = 0;                                              // 0 bottom, 1 right, 2 top, 3 left
    for (long i = 0; i < n; i++) {
        double t = ((vy > 0 ? R : -R) - y) / vy, h = x + t * vx;
        if (fabs(h) <= a && t > 0 && on != (vy > 0 ? 2 : 0)) {
            x = h, y = vy > 0 ? R : -R;
            on = vy > 0 ? 2 : 0;
            p = vy > 0 ? -vx : vx;
            vy = -vy;
            SECTION(s = on == 0 ? x + a : 2 * a + M_PI * R + a - x;)
        } else {
            double c = h > 0 ? a : -a;
            if (fabs(h) <= a) c = vx > 0 ? a : -a; // along a side that it just left
            double dx = x - c, b = dx * vx + y * vy, k = dx * dx + y * y - R * R;
            t = -b + sqrt(b * b - k);
            x += t * vx, y += t * vy;
            double nx = (x - c) / R, ny = y / R, vn = vx * nx + vy * ny;
            p = vy * nx - vx * ny;
            vx -= 2 * vn * nx, vy -= 2 * vn * ny;
            UNIT(vx, vy);
            on = c > 0 ? 1 : 3;
            SECTION(s = c > 0 ? 2 * a + R * (atan2(ny, nx) + M_PI / 2) : 4 * a + M_PI * R + R * (atan2(-ny, -nx) + M_PI / 2);)
        }
        NOTE(sum, x, y, s, p);
    }
}
