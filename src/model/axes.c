/* The local axes of members. */
#include "axes.h"

#include <math.h>
#include <string.h>

#include "base/vector.h"

/* Sines: below the first, `up` as given does not point away from the member; below the second, a member without `up`
 * counts as vertical, so that it does not turn by a hair's breadth of tilt. */
static const double ALONG = 1e-6, VERTICAL = 1e-3;

double sct_joint_distance(const sct_model *model, int from, int to)
{
    const double *p = model->joints[from].at, *q = model->joints[to].at;
    return hypot(hypot(q[0] - p[0], q[1] - p[1]), q[2] - p[2]);
}

/* The part of `up` square to the unit vector t, as a unit vector; false: it is not longer than `least`. */
static bool square_to(const double t[3], const double up[3], double least, double v[3])
{
    double w[3];
    sct_cross3(t, up, w);
    sct_cross3(w, t, v); /* up - (up.t) t, without cancellation */
    const double length = hypot(hypot(v[0], v[1]), v[2]);
    if (!(length > least)) return false;
    for (int k = 0; k < 3; k++) v[k] /= length;
    return true;
}

bool sct_member_axes(const sct_model *model, const sct_member *member, double axes[3][3])
{
    static const double X[3] = {1, 0, 0}, Z[3] = {0, 0, 1};
    const double *p = model->joints[member->from].at, *q = model->joints[member->to].at, *up = member->up;
    const double L = sct_joint_distance(model, member->from, member->to);
    double *t = axes[0], v[3], w[3];
    if (!(L > 0)) return false;
    for (int k = 0; k < 3; k++) t[k] = (q[k] - p[k]) / L;
    if (model->dimensions == 2) {
        sct_cross3(Z, t, axes[1]);
        memcpy(axes[2], Z, sizeof Z);
        return true;
    }
    const bool is_given = up[0] != 0 || up[1] != 0 || up[2] != 0;
    if (is_given ? !square_to(t, up, ALONG, v) : !square_to(t, Z, VERTICAL, v) && !square_to(t, X, VERTICAL, v))
        return false;
    sct_cross3(t, v, w);
    const double c = cos(member->roll), s = sin(member->roll);
    for (int k = 0; k < 3; k++) axes[1][k] = c * v[k] + s * w[k];
    sct_cross3(t, axes[1], axes[2]);
    return true;
}
