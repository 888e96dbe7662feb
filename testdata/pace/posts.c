// A square of side 10 about the origin with 60 posts of radius 0.5 in the
// middles of the cells of an 8 x 8 grid, row by row from the lower left. Every
// post is tested.
#include "pace.h"

enum { POSTS = 60, ROW = 8 };
static double cx[POSTS], cy[POSTS];

static void run(long n, double s, double p, struct sums *sum) {
    const double a = 5, R = 0.5;
    for (int i = 0; i < POSTS; i++)
        cx[i] = 2 * a * ((i % ROW + 0.5) / ROW - 0.5), cy[i] = 2 * a * ((i / ROW + 0.5) / ROW - 0.5);
    double x = -a + s, y = -a, vx = p, vy = sqrt(1 - p * p); // s on the bottom side
    int on = -1;
    for (long i = 0; i < n; i++) {
        double tx = ((vx > 0 ? a : -a) - x) / vx, ty = ((vy > 0 ? a : -a) - y) / vy;
        double t = tx < ty ? tx : ty;
        int hit = -1;
        for (int k = 0; k < POSTS; k++) {
            double dx = cx[k] - x, dy = cy[k] - y, b = dx * vx + dy * vy, c = dx * vy - dy * vx;
            double disc = R * R - c * c;
            if (disc > 0 && b > 0 && k != on) {
                double u = b - sqrt(disc);
                if (u < t) t = u, hit = k;
            }
        }
        x += t * vx, y += t * vy;
        on = hit;
        if (hit >= 0) {
            double nx = (x - cx[hit]) / R, ny = (y - cy[hit]) / R, vn = vx * nx + vy * ny;
            vx -= 2 * vn * nx, vy -= 2 * vn * ny;
            UNIT(vx, vy);
            p = vx * ny - vy * nx;
            SECTION(double f = atan2(ny, nx); s = 8 * a + R * (2 * M_PI * hit + (f <= 0 ? -f : 2 * M_PI - f));)
        } else if (tx < ty) {
            x = vx > 0 ? a : -a;
            p = vx > 0 ? vy : -vy;
            vx = -vx;
            SECTION(s = x > 0 ? 2 * a + (y + a) : 6 * a + (a - y);)
        } else {
            y = vy > 0 ? a : -a;
            p = vy > 0 ? -vx : vx;
            vy = -vy;
            SECTION(s = y < 0 ? x + a : 4 * a + (a - x);)
        }
        NOTE(sum, x, y, s, p);
    }
}
