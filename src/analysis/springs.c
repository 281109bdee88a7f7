/* The springs of members and supports: what they are proportional to, and how their elongations follow from the
 * unknowns. */
#include <stdlib.h>
#include <string.h>

#include "analysis/structure_parts.h"
#include "base/text.h"
#include "base/vector.h"

/* Most springs of a member beyond its axial one: two per plane, twist, and six sprung ends. */
enum { MOST_SPRINGS = 11 };

/* ---- shapes ------------------------------------------------------------------------------------------------------ */

/* Adds factor * (rotation of an end about its axis). */
static void add_turn(const sct_bar *bar, int end, int r, double factor, sct_mode_shape *shape)
{
    double axis[3];
    sct_turn_axis(bar, r, axis);
    shape->end_dof[end] = bar->end_dof[end][r];
    if (shape->end_dof[end] >= 0)
        shape->end_b[end] = factor;
    else
        for (int i = 0; i < 3; i++) shape->turn[end][i] = factor * axis[i];
}

/* Adds factor * psi, psi the rotation of the chord: the difference of the displacements across it / L. */
static void add_chord(const sct_bar *bar, int plane, double factor, sct_mode_shape *shape)
{
    for (int i = 0; i < 3; i++) shape->move[i] = factor * bar->axes[1 + plane][i] / bar->L;
}

sct_mode_shape sct_mode_shape_of(const sct_structure *st, const sct_spring *spring)
{
    sct_mode_shape shape = {.end_dof = {-1, -1}};
    const sct_bar *bar = &st->bars[spring->bar];
    double axis[3];
    switch (spring->mode) {
    case SCT_MODE_AXIAL: memcpy(shape.move, bar->axes[0], sizeof shape.move); break;
    case SCT_MODE_SYMMETRIC:
        add_turn(bar, 0, spring->plane, -1.0, &shape);
        add_turn(bar, 1, spring->plane, 1.0, &shape);
        break;
    case SCT_MODE_ANTISYMMETRIC:
        add_turn(bar, 0, spring->plane, 1.0, &shape);
        add_turn(bar, 1, spring->plane, 1.0, &shape);
        add_chord(bar, spring->plane, -2.0, &shape);
        break;
    case SCT_MODE_TO:
    case SCT_MODE_FROM:
        add_turn(bar, spring->mode == SCT_MODE_TO, spring->plane, 1.0, &shape);
        add_chord(bar, spring->plane, -1.0, &shape);
        break;
    case SCT_MODE_TWIST:
        add_turn(bar, 0, SCT_TWIST, -1.0, &shape);
        add_turn(bar, 1, SCT_TWIST, 1.0, &shape);
        break;
    case SCT_MODE_END:
        sct_turn_axis(bar, spring->plane, axis);
        memcpy(shape.turn[spring->end], axis, sizeof axis);
        shape.end_dof[spring->end] = bar->end_dof[spring->end][spring->plane];
        shape.end_b[spring->end] = -1.0;
        break;
    case SCT_MODE_SUPPORT: /* has one joint only: see add_support */ break;
    }
    return shape;
}

/* ---- unknowns of springs and members ----------------------------------------------------------------------------- */

/* Takes from the pools. */
typedef struct builder {
    sct_structure *st;
    int *dof;
    double *b;
} builder;

static void add_term(builder *to, sct_spring *s, int dof, double b)
{
    s->dof[s->n_dof] = dof;
    s->b[s->n_dof++] = b;
    to->dof = s->dof + s->n_dof;
    to->b = s->b + s->n_dof;
}

static void add_displacement(builder *to, sct_spring *s, int joint, const double direction[3], double sign)
{
    const sct_structure *st = to->st;
    for (int i = 0; i < st->n_free[joint]; i++)
        add_term(to, s, st->first_dof[joint] + i, sign * sct_dot3(st->basis[joint][i], direction));
}

static void add_rotation(builder *to, sct_spring *s, int joint, const double axis[3])
{
    const sct_structure *st = to->st;
    for (int i = 0; i < st->n_turns[joint] && !sct_is_zero3(axis); i++)
        add_term(to, s, st->first_dof[joint] + st->n_free[joint] + i, sct_dot3(st->turn_basis[joint][i], axis));
}

static bool are_opposite(int n, const double a[], const double b[])
{
    for (int i = 0; i < n; i++)
        if (a[i] != -b[i]) return false;
    return true;
}

static void add_terms(builder *to, sct_spring *s)
{
    const sct_structure *st = to->st;
    const sct_bar *bar = &st->bars[s->bar];
    const sct_mode_shape shape = sct_mode_shape_of(st, s);
    const int joint[2] = {bar->from, bar->to};
    s->dof = to->dof;
    s->b = to->b;
    if (!sct_is_zero3(shape.move)) {
        add_displacement(to, s, bar->from, shape.move, -1.0);
        add_displacement(to, s, bar->to, shape.move, 1.0);
        const int n = st->n_free[bar->from];
        if (n == st->n_free[bar->to] && are_opposite(n, s->b, s->b + n)) s->n_pairs = n;
    }
    for (int end = 0; end < 2; end++) {
        add_rotation(to, s, joint[end], shape.turn[end]);
        if (shape.end_dof[end] >= 0) add_term(to, s, shape.end_dof[end], shape.end_b[end]);
    }
}

/* ---- which springs there are ---------------------------------------------------------------------------------------
 */

static sct_spring *new_spring(sct_structure *st, int bar, sct_mode mode, sct_property property)
{
    sct_spring *s = &st->springs[st->n_springs++];
    const sct_bar *b = &st->bars[bar];
    const bool is_axial = mode == SCT_MODE_AXIAL;
    *s = (sct_spring){.mode = mode, .bar = bar, .group = b->group, .property = property};
    s->E = b->E;
    s->L = b->L;
    s->span = is_axial ? 1.0 : b->L;
    return s;
}

static void add_bending(sct_structure *st, int bar, int plane)
{
    const sct_bar *b = &st->bars[bar];
    const bool from = b->hinges.free_turn[plane][0], to = b->hinges.free_turn[plane][1];
    const sct_property I = plane == SCT_IN_PLANE ? SCT_OF_INERTIA_IN : SCT_OF_INERTIA_OUT;
    if (from && to) return;
    if (!from && !to) new_spring(st, bar, SCT_MODE_SYMMETRIC, I)->plane = plane;
    sct_spring *s = new_spring(st, bar, from ? SCT_MODE_TO : to ? SCT_MODE_FROM : SCT_MODE_ANTISYMMETRIC, I);
    s->plane = plane;
    s->E = 3.0 * b->E;
}

static void add_ends(sct_structure *st, int bar)
{
    for (int end = 0; end < 2; end++) {
        for (int r = 0; r < SCT_TURNS; r++) {
            if (st->bars[bar].end_dof[end][r] < 0) continue;
            sct_spring *s = new_spring(st, bar, SCT_MODE_END, SCT_CONSTANT);
            s->plane = r;
            s->end = end;
            s->group = -1;
            s->E = st->model->members[bar].end[end].stiffness[r];
            s->L = 1.0;
        }
    }
}

/* An area that the group can have. */
static double some_area(const sct_model *m, const sct_group *g)
{
    return g->kind == SCT_FREE_AREA ? g->A_min
           : g->kind == SCT_LADDER  ? m->families[g->family].sections[g->ladder[0]].A
                                    : g->A_held;
}

/* Says what a beam lacks. */
static void check_properties(const sct_structure *st, int bar, sct_issues *issues)
{
    static const char *const LACKS[] = {NULL, "no second moment of area in plane",
                                        "no second moment of area out of plane", "no torsion constant"};
    const sct_bar *b = &st->bars[bar];
    const sct_member *member = &st->model->members[bar];
    const sct_group *group = &st->model->groups[b->group];
    const sct_properties size = sct_properties_at_area(st->model, b->group, some_area(st->model, group));
    bool is_told[SCT_PROPERTIES] = {false};
    for (int i = b->first; i < b->first + b->n; i++) {
        const sct_spring *s = &st->springs[i];
        if (s->group < 0 || size.P[s->property] > 0.0 || is_told[s->property]) continue;
        is_told[s->property] = true;
        sct_issue_add(issues, SCT_ERROR, member->where,
                      "the ends of member \"%s\" are not pinned, but group \"%s\" states %s",
                      sct_show(member->name).text, sct_show(group->name).text, LACKS[s->property]);
    }
    const sct_material *material = &st->model->materials[group->material];
    const bool twists = b->n > 0 && st->springs[b->first + b->n - 1].mode == SCT_MODE_TWIST;
    if (twists && !(material->G > 0.0))
        sct_issue_add(issues, SCT_ERROR, member->where,
                      "member \"%s\" resists twist, but material \"%s\" has no \"G\" (or say \"torsion\": \"pinned\")",
                      sct_show(member->name).text, sct_show(material->name).text);
}

/* The springs of a member beyond its axial one; twist comes last. */
static void add_beam(sct_structure *st, int bar, sct_issues *issues)
{
    sct_bar *b = &st->bars[bar];
    b->first = st->n_springs;
    add_bending(st, bar, SCT_IN_PLANE);
    if (st->dim == 3) add_bending(st, bar, SCT_OUT_OF_PLANE);
    add_ends(st, bar);
    if (st->dim == 3 && !b->hinges.free_turn[SCT_TWIST][0] && !b->hinges.free_turn[SCT_TWIST][1])
        new_spring(st, bar, SCT_MODE_TWIST, SCT_OF_TORSION)->E =
            st->model->materials[st->model->groups[b->group].material].G;
    b->n = st->n_springs - b->first;
    check_properties(st, bar, issues);
}

static void add_support(builder *to, int joint, const sct_joint_spring *support)
{
    sct_structure *st = to->st;
    sct_spring *s = &st->springs[st->n_springs++];
    *s = (sct_spring){.mode = SCT_MODE_SUPPORT, .bar = -1, .group = -1, .property = SCT_CONSTANT};
    s->E = support->stiffness;
    s->L = 1.0;
    s->span = support->is_turn ? st->lever : 1.0;
    s->dof = to->dof;
    s->b = to->b;
    if (support->is_turn)
        add_rotation(to, s, joint, support->dir);
    else
        add_displacement(to, s, joint, support->dir, 1.0);
}

/* ---- own weight ----------------------------------------------------------------------------------------------------
 */

/* The unknowns of a beam: those of both joints and of its sprung ends. Those of a bar are its axial spring's. */
static void list_unknowns(builder *to, sct_bar *bar)
{
    const sct_structure *st = to->st;
    const int joint[2] = {bar->from, bar->to};
    for (int end = 0; end < 2; end++) {
        for (int i = 0; i < st->n_free[joint[end]] + st->n_turns[joint[end]]; i++)
            bar->dof[bar->n_dof++] = st->first_dof[joint[end]] + i;
    }
    for (int end = 0; end < 2; end++)
        for (int r = 0; r < SCT_TURNS; r++)
            if (bar->end_dof[end][r] >= 0) bar->dof[bar->n_dof++] = bar->end_dof[end][r];
    to->dof = bar->dof + bar->n_dof;
}

/* What acts on sprung ends, into their unknowns at `on`; leaves in M what acts on the joint. */
static void take_sprung(const sct_bar *bar, int end, double M[3], double **on)
{
    for (int r = 0; r < SCT_TURNS; r++) {
        double axis[3];
        if (bar->end_dof[end][r] < 0) continue;
        sct_turn_axis(bar, r, axis);
        const double along = sct_dot3(axis, M);
        *(*on)++ = along;
        for (int i = 0; i < 3; i++) M[i] -= along * axis[i];
    }
}

void sct_project_ends(const sct_structure *st, const sct_bar *bar, double end[2][6], double on[])
{
    const int joint[2] = {bar->from, bar->to};
    double sprung[2 * SCT_TURNS] = {0}, *next = sprung;
    for (int s = 0; s < 2; s++) take_sprung(bar, s, end[s] + 3, &next);
    for (int s = 0; s < 2; s++) {
        const int j = joint[s], n_turns = bar->n > 0 ? st->n_turns[j] : 0;
        for (int i = 0; i < st->n_free[j]; i++) *on++ = sct_dot3(st->basis[j][i], end[s]);
        for (int i = 0; i < n_turns; i++) *on++ = sct_dot3(st->turn_basis[j][i], end[s] + 3);
    }
    for (const double *p = sprung; p < next; p++) *on++ = *p;
}

static void weigh_bar(builder *to, int e)
{
    sct_structure *st = to->st;
    sct_bar *bar = &st->bars[e];
    double end[2][6];
    bar->dof = bar->n > 0 ? to->dof : st->springs[e].dof;
    if (bar->n > 0)
        list_unknowns(to, bar);
    else
        bar->n_dof = st->n_free[bar->from] + st->n_free[bar->to];
    bar->w = to->b;
    sct_bar_weight(st, e, end);
    sct_project_ends(st, bar, end, bar->w);
    to->b = bar->w + bar->n_dof;
}

/* ---- all of it -----------------------------------------------------------------------------------------------------
 */

static int count_supports(const sct_structure *st)
{
    int n = 0;
    for (int j = 0; j < st->n_joints; j++)
        if (st->n_free[j] > 0 || st->n_turns[j] > 0) n += st->model->joints[j].n_springs;
    return n;
}

static bool is_beam(const sct_structure *st, int e)
{
    const sct_bar *bar = &st->bars[e];
    for (int end = 0; end < 2; end++)
        for (int r = 0; r < (st->dim == 2 ? 1 : SCT_TURNS); r++)
            if (!bar->hinges.free_turn[r][end]) return true;
    return false;
}

/* Room for springs, and for the unknowns of springs and members. */
static bool allocate(sct_structure *st)
{
    size_t beams = 0, supports = (size_t)count_supports(st), bars = (size_t)st->n_bars;
    for (int e = 0; e < st->n_bars; e++) beams += is_beam(st, e);
    const size_t n_springs = bars + MOST_SPRINGS * beams + supports, dim = (size_t)st->dim;
    const size_t of_bars = 2 * dim * bars, of_beams = (size_t)((MOST_SPRINGS + 1) * SCT_MOST_BAR_DOF) * beams;
    st->springs = calloc(n_springs + 1, sizeof *st->springs);
    st->dof_pool = calloc(of_bars + of_beams + 3 * supports + 1, sizeof *st->dof_pool);
    st->b_pool = calloc(2 * of_bars + of_beams + 3 * supports + 1, sizeof *st->b_pool); /* b and w */
    return st->springs != NULL && st->dof_pool != NULL && st->b_pool != NULL;
}

sct_status sct_list_springs(sct_structure *st, sct_issues *issues)
{
    if (!allocate(st)) return SCT_NO_MEMORY;
    builder to = {.st = st, .dof = st->dof_pool, .b = st->b_pool};
    for (int e = 0; e < st->n_bars; e++) add_terms(&to, new_spring(st, e, SCT_MODE_AXIAL, SCT_OF_AREA));
    for (int e = 0; e < st->n_bars; e++) {
        if (is_beam(st, e)) add_beam(st, e, issues);
        st->bars[e].is_bent = st->bars[e].n > 0;
        for (int i = 0; i < st->bars[e].n; i++) add_terms(&to, &st->springs[st->bars[e].first + i]);
        weigh_bar(&to, e);
    }
    for (int j = 0; j < st->n_joints; j++) {
        const sct_joint *joint = &st->model->joints[j];
        if (st->n_free[j] == 0 && st->n_turns[j] == 0) continue;
        for (int k = 0; k < joint->n_springs; k++) add_support(&to, j, &joint->springs[k]);
    }
    for (int i = 0; i < st->n_springs; i++)
        if (st->springs[i].n_dof > st->most_dof) st->most_dof = st->springs[i].n_dof;
    return SCT_OK;
}
