#include "analysis/beam.h"

/* The held member answers a load by virtual work: the force on joint and direction i is int q(x) N_i(x) dx, where N_i
 * is the shape that the member takes when that joint alone moves by 1 (reciprocal theorem); a moment m (in the sense of
 * v') at a gives m N_i'(a), a force P N_i(a). The N_i are cubic and q is linear, so three Gauss points are exact
 * (degree 5), their weights are positive, and the N_i below are products of positive factors of x and y = L - x: so no
 * two numbers of opposite sign are added that the load itself does not bring. */

/* Shapes and their slopes at x: r[0] deflection of the start, r[1] its rotation, r[2], r[3] those of the end. */
typedef struct shapes {
    double N[4], dN[4];
} shapes;

/* Both ends hinged: N = 1 - xi, xi. */
static shapes simple_shapes(double L, double x, double y)
{
    return (shapes){{y / L, 0, x / L, 0}, {-1 / L, 0, 1 / L, 0}};
}

/* Both ends fixed, Hermite: 1 - 3 xi^2 + 2 xi^3, x (1 - xi)^2, 3 xi^2 - 2 xi^3, -x xi (1 - xi); eta = 1 - xi. */
static shapes fixed_shapes(double L, double x, double y)
{
    const double xi = x / L, eta = y / L;
    return (shapes){{eta * eta * (1 + 2 * xi), x * eta * eta, xi * xi * (1 + 2 * eta), -y * xi * xi},
                    {-6 * xi * eta / L, eta * (eta - 2 * xi), 6 * xi * eta / L, xi * (xi - 2 * eta)}};
}

/* Hinged at the start, fixed at the end: 1 - 3/2 xi + xi^3/2, 0, 3/2 xi - xi^3/2, -L (xi - xi^3)/2. */
static shapes propped_shapes(double L, double x, double y)
{
    const double xi = x / L, eta = y / L, slope = 1.5 * eta * (1 + xi) / L;
    return (shapes){{eta * eta * (2 + xi) / 2, 0, xi * (3 - xi * xi) / 2, -x * eta * (1 + xi) / 2},
                    {-slope, 0, slope, (3 * xi * xi - 1) / 2}};
}

static shapes held_shapes(double L, const bool hinged[2], double x, double y)
{
    if (hinged[0] && hinged[1]) return simple_shapes(L, x, y);
    if (hinged[0]) return propped_shapes(L, x, y);
    if (!hinged[1]) return fixed_shapes(L, x, y);
    const shapes m = propped_shapes(L, y, x); /* seen from the other end: x and rotations change their sense */
    return (shapes){{m.N[2], -m.N[3], m.N[0], 0}, {-m.dN[2], m.dN[3], -m.dN[0], 0}};
}

/* r += what one load puts on the ends across (or along) one axis; m: its moment in the sense of v'. */
static void add_load(double L, const bool hinged[2], const sct_beam_load *load, int axis, double m, double r[4])
{
    if (load->is_point) {
        const shapes s = held_shapes(L, hinged, load->a, L - load->a);
        for (int i = 0; i < 4; ++i) r[i] += load->F[axis] * s.N[i] + m * s.dN[i];
        return;
    }
    static const double point[3] = {0.11270166537925831, 0.5, 0.88729833462074169}; /* (1 -+ sqrt(3/5))/2 */
    static const double weight[3] = {5.0 / 18, 8.0 / 18, 5.0 / 18};
    const double h = load->b - load->a;
    for (int g = 0; g < 3; ++g) {
        const double t = point[g], u = point[2 - g];
        const double Q = weight[g] * h * (load->qa[axis] * u + load->qb[axis] * t);
        const shapes s = held_shapes(L, hinged, load->a + h * t, (L - load->b) + h * u);
        for (int i = 0; i < 4; ++i) r[i] += Q * s.N[i];
    }
}

/* Torque: shared linearly between ends that hold it, all to the one that does. */
static void add_torque(double L, const bool free_twist[2], const sct_beam_load *load, double end[2][6])
{
    if (!load->is_point) return;
    const double share = free_twist[0] == free_twist[1] ? load->a / L : free_twist[0] ? 1 : 0;
    const double rest = free_twist[0] == free_twist[1] ? (L - load->a) / L : 1 - share;
    end[0][3] += rest * load->M[0];
    end[1][3] += share * load->M[0];
}

void sct_beam_loads_scaled(double factor, int n, const sct_beam_load in[], sct_beam_load out[])
{
    for (int i = 0; i < n; ++i) {
        out[i] = in[i];
        for (int j = 0; j < 3; ++j) {
            out[i].qa[j] *= factor;
            out[i].qb[j] *= factor;
            out[i].F[j] *= factor;
            out[i].M[j] *= factor;
        }
    }
}

void sct_beam_fixed_ends(double L, const sct_beam_hinges *hinges, int n, const sct_beam_load loads[], double end[2][6])
{
    static const bool as_bar[2] = {true, true}; /* N = 1 - xi, xi along the axis, too */
    double along[4] = {0}, in[4] = {0}, out[4] = {0};
    end[0][3] = end[1][3] = 0;
    for (int i = 0; i < n; ++i) {
        add_load(L, as_bar, &loads[i], 0, 0, along);
        add_load(L, hinges->free_turn[0], &loads[i], 1, loads[i].M[2], in);
        add_load(L, hinges->free_turn[1], &loads[i], 2, -loads[i].M[1], out);
        add_torque(L, hinges->free_turn[2], &loads[i], end);
    }
    for (int e = 0; e < 2; ++e) {
        end[e][0] = along[2 * e];
        end[e][1] = in[2 * e];
        end[e][2] = out[2 * e];
        end[e][4] = -out[2 * e + 1];
        end[e][5] = in[2 * e + 1];
    }
}

int sct_beam_mode_count(const sct_beam_hinges *hinges, int plane)
{
    return 2 - hinges->free_turn[plane][0] - hinges->free_turn[plane][1];
}

void sct_beam_mode(const sct_beam_hinges *hinges, int plane, int k, double mode[2])
{
    const bool *hinged = hinges->free_turn[plane];
    mode[0] = hinged[0] ? 0 : hinged[1] || k == 1 ? -1 : 1;
    mode[1] = hinged[1] ? 0 : 1;
}

double sct_beam_mode_moment(double L, const double mode[2], double x)
{
    return mode[0] * ((L - x) / L) + mode[1] * (x / L);
}

/* m = 1 - xi gives v = -L^2/6 xi (1 - xi)(2 - xi)/EI, m = xi its mirror image. */
double sct_beam_mode_bow(double L, const double mode[2], double x)
{
    const double y = L - x;
    return -(x * y / 6) * (mode[0] * (1 + y / L) + mode[1] * (1 + x / L));
}

/* d/dx of the above: m = xi: -(L/6)(1 - 3 xi^2). */
double sct_beam_mode_slope(double L, const double mode[2], double x)
{
    const double xi = x / L, eta = (L - x) / L;
    return (L / 6) * (mode[0] * (1 - 3 * eta * eta) - mode[1] * (1 - 3 * xi * xi));
}
