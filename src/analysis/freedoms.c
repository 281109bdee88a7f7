/* The unknowns: what supports leave free of each joint's displacement, and of the rotations that members' ends take
 * part in. */
#include <string.h>

#include "analysis/structure_parts.h"
#include "base/vector.h"

/* Sine of an angle: an axis that lies so near to the span of others adds no rotation of its own. */
static const double SAME_AXIS = 1e-6;

int sct_span_of(int n, const double v[][3], double span[3][3])
{
    int n_span = 0;
    for (int k = 0; k < n; k++) {
        memcpy(span[n_span], v[k], sizeof span[n_span]);
        sct_project_off3(span[n_span], n_span, (const double(*)[3])span);
        const double left = sct_length3(span[n_span]);
        if (!(left > SCT_TOL_DIRECTION)) continue; /* says nothing new; the reader refuses it */
        for (int i = 0; i < 3; i++) span[n_span][i] /= left;
        n_span++;
    }
    return n_span;
}

/* What the axes leave outside the span of the held directions, farthest axis first, so that a support along axes keeps
 * the axes themselves. */
static int free_directions(int n_given, const double held[][3], int dim, double basis[3][3])
{
    double all[3][3] = {{0}};
    const int n_held = sct_span_of(n_given, held, all);
    for (int n = n_held; n < dim; n++) {
        double best[3] = {0}, best_length = 0.0;
        for (int axis = 0; axis < dim; axis++) {
            double e[3] = {0};
            e[axis] = 1.0;
            sct_project_off3(e, n, (const double(*)[3])all);
            const double left = sct_length3(e);
            if (!(left > best_length * (1.0 + 1e-12))) continue; /* ties go to the first axis */
            best_length = left;
            memcpy(best, e, sizeof best);
        }
        for (int i = 0; i < 3; i++) all[n][i] = best[i] / best_length;
        memcpy(basis[n - n_held], all[n], sizeof all[n]);
    }
    return dim - n_held;
}

void sct_turn_axis(const sct_bar *bar, int r, double axis[3])
{
    for (int i = 0; i < 3; i++)
        axis[i] = r == SCT_TWIST ? bar->axes[0][i] : r == SCT_IN_PLANE ? bar->axes[2][i] : -bar->axes[1][i];
}

/* Does the end of a member take part in rotation r of its joint? A hinge at one end leaves bending at the other, but no
 * twist at all. */
static bool takes_part(const sct_structure *st, const sct_bar *bar, int end, int r)
{
    if (st->dim == 2 && r != SCT_IN_PLANE) return false;
    return !bar->hinges.free_turn[r][end] && (r != SCT_TWIST || !bar->hinges.free_turn[r][1 - end]);
}

/* Adds an axis to the rotations of a joint, less what its supports hold. */
static void add_turn(sct_structure *st, int joint, const double axis[3])
{
    const sct_joint *j = &st->model->joints[joint];
    double span[3][3], left[3];
    const int n = sct_span_of(j->n_turns_held, j->turns_held, span);
    memcpy(left, axis, sizeof left);
    sct_project_off3(left, n, (const double(*)[3])span);
    if (!(sct_length3(left) > SAME_AXIS)) return;
    sct_project_off3(left, st->n_turns[joint], (const double(*)[3])st->turn_basis[joint]);
    const double length = sct_length3(left);
    if (!(length > SAME_AXIS) || st->n_turns[joint] == 3 - n) return;
    for (int i = 0; i < 3; i++) st->turn_basis[joint][st->n_turns[joint]][i] = left[i] / length;
    st->n_turns[joint]++;
}

static void find_turns(sct_structure *st)
{
    for (int e = 0; e < st->n_bars; e++) {
        const sct_bar *bar = &st->bars[e];
        for (int end = 0; end < 2; end++) {
            for (int r = 0; r < SCT_TURNS; r++) {
                double axis[3];
                sct_turn_axis(bar, r, axis);
                if (takes_part(st, bar, end, r)) add_turn(st, end == 0 ? bar->from : bar->to, axis);
            }
        }
    }
    for (int j = 0; j < st->n_joints; j++) {
        const sct_joint *joint = &st->model->joints[j];
        if (st->n_turns[j] == 0) continue; /* a spring against a rotation that no member knows holds nothing */
        for (int k = 0; k < joint->n_springs; k++)
            if (joint->springs[k].is_turn) add_turn(st, j, joint->springs[k].dir);
        /* all that the supports leave: along the axes themselves */
        double span[3][3];
        if (st->dim == 3 && st->n_turns[j] == 3 - sct_span_of(joint->n_turns_held, joint->turns_held, span))
            free_directions(joint->n_turns_held, joint->turns_held, 3, st->turn_basis[j]);
    }
}

/* Sprung ends come behind all joints. */
static void number_ends(sct_structure *st)
{
    for (int e = 0; e < st->n_bars; e++) {
        sct_bar *bar = &st->bars[e];
        for (int end = 0; end < 2; end++)
            for (int r = 0; r < SCT_TURNS; r++) {
                const bool is_sprung = st->model->members[e].end[end].fixity[r] == SCT_SPRUNG;
                bar->end_dof[end][r] = is_sprung && takes_part(st, bar, end, r) ? st->n_dof++ : -1;
            }
    }
}

void sct_number_freedoms(sct_structure *st, const bool has_member[])
{
    find_turns(st);
    for (int j = 0; j < st->n_joints; j++) {
        const sct_joint *joint = &st->model->joints[j];
        st->first_dof[j] = st->n_dof;
        st->n_free[j] = has_member[j] ? free_directions(joint->n_held, joint->held, st->dim, st->basis[j]) : 0;
        st->n_dof += st->n_free[j] + st->n_turns[j];
    }
    number_ends(st);
}
