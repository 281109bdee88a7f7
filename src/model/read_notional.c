/* Notional loads: a part of the downward loads of another case, sideways at the same joints. */
#include <math.h>
#include <string.h>

#include "axes.h"
#include "base/number.h"
#include "reader.h"

/* A number, or "1/200". */
static bool read_part(sct_reader *r, const sct_node *node, double *part)
{
    static const sct_range PART = {"a part of the loads", -1, 1e-6, 1, 0, 0, NULL};
    if (node == NULL) return false;
    const char *text = sct_node_string(node);
    double n;
    if (text == NULL) return sct_fields_value(&r->f, node, &PART, part);
    if (strncmp(text, "1/", 2) == 0 && sct_number_read(text + 2, strlen(text + 2), &n) && n >= 1 && n <= 1e6) {
        *part = 1 / n;
        return true;
    }
    sct_fields_error(&r->f, node, "found \"%s\"; expected a part such as \"1/200\" or 0.005", sct_show(text).text);
    return false;
}

void sct_read_notional(sct_reader *r, const sct_node *node, int c)
{
    enum { K_OF, K_PART, K_DIRECTION, N };
    static const sct_key KEYS[N] = {{"of", "the name of a load case"},
                                    {"part", "a part such as \"1/200\""},
                                    {"direction", "\"x\", or another direction that is level"}};
    static const double LEVEL = 1e-6;
    const sct_node *found[N];
    sct_notional said = {.node = node};
    if (!sct_fields_keys(&r->f, node, "notional loads", KEYS, N, found)) return;
    const bool has_of = sct_fields_reference(&r->f, found[K_OF], "load case", r->cases, &said.of);
    if (has_of && said.of == c)
        sct_fields_error(&r->f, found[K_OF], "the loads would be a part of themselves; expected another load case");
    const bool has_part = read_part(r, found[K_PART], &said.part);
    if (!sct_fields_direction(&r->f, found[K_DIRECTION], said.direction, NULL) || !has_of || !has_part) return;
    if (r->f.dimensions != 0 && fabs(said.direction[r->f.dimensions - 1]) > LEVEL) {
        sct_fields_error(&r->f, found[K_DIRECTION], "notional loads are level; expected a direction without \"%s\"",
                         r->f.dimensions == 3 ? "z" : "y");
        return;
    }
    r->notional[c] = said;
}

/* A load per metre of member, or a force, as its part along axis v of the model. */
static double vertical(const sct_member_load *load, const double q[3], const double axes[3][3], int v)
{
    switch (load->axes) {
    case SCT_AXES_MEMBER: return q[0] * axes[0][v] + q[1] * axes[1][v] + q[2] * axes[2][v];
    case SCT_AXES_PROJECTED: return q[v] * hypot(axes[0][(v + 1) % 3], axes[0][(v + 2) % 3]);
    case SCT_AXES_MODEL: break;
    }
    return q[v];
}

/* The vertical reactions of a simple beam from the joints of the member; a couple has no downward load. */
static void add_reactions(const sct_model *m, const sct_member_load *load, double down[])
{
    const sct_member *member = &m->members[load->member];
    const int v = m->dimensions - 1;
    const double L = sct_joint_distance(m, member->from, member->to), a = load->a, b = load->b;
    double axes[3][3], P, about_start;
    if (!sct_member_axes(m, member, axes)) return;
    if (load->is_point) {
        P = vertical(load, load->F, (const double(*)[3])axes, v);
        about_start = P * a;
    } else {
        const double qa = vertical(load, load->qa, (const double(*)[3])axes, v),
                     qb = vertical(load, load->qb, (const double(*)[3])axes, v);
        P = (qa + qb) / 2 * (b - a);
        about_start = (b - a) / 6 * (qa * (2 * a + b) + qb * (a + 2 * b));
    }
    down[member->to] -= about_start / L;
    down[member->from] -= P - about_start / L;
}

static void add_loads(sct_reader *r, const sct_notional *said, sct_case *c, double down[])
{
    const sct_model *m = r->model;
    const sct_case *of = &m->cases[said->of];
    int n = 0;
    memset(down, 0, (size_t)m->n_joints * sizeof *down);
    for (int i = 0; i < of->n_loads; i++) down[of->loads[i].joint] -= of->loads[i].F[m->dimensions - 1];
    for (int i = 0; i < of->n_member_loads; i++) add_reactions(m, &of->member_loads[i], down);
    for (int j = 0; j < m->n_joints; j++) n += down[j] > 0;
    if (!sct_reader_has_room(r, said->node, n)) return;
    sct_joint_load *loads = sct_fields_array(&r->f, c->n_loads + n, sizeof *loads);
    if (loads == NULL) return;
    if (c->n_loads > 0) memcpy(loads, c->loads, (size_t)c->n_loads * sizeof *loads);
    c->loads = loads;
    const sct_where where = sct_fields_where(&r->f, said->node);
    for (int j = 0; j < m->n_joints; j++) {
        if (!(down[j] > 0)) continue; /* lifted joints lean nowhere */
        sct_joint_load *load = &c->loads[c->n_loads++];
        *load = (sct_joint_load){.joint = j, .where = where};
        for (int k = 0; k < 3; k++) load->F[k] = said->part * down[j] * said->direction[k];
    }
    if (of->self_weight > 0)
        sct_fields_remark(&r->f, SCT_WARNING, said->node,
                          "the self-weight of case \"%s\" is not known before the sizes are: these loads are a part of "
                          "its other loads only",
                          sct_show(of->name).text);
}

void sct_add_notional_loads(sct_reader *r)
{
    const sct_model *m = r->model;
    double *down = NULL;
    for (int c = 0; c < m->n_cases; c++) {
        const sct_notional *said = &r->notional[c];
        if (said->node == NULL) continue;
        if (r->notional[said->of].node != NULL) {
            sct_fields_error(&r->f, said->node,
                             "case \"%s\" has notional loads itself; expected one with loads of its own",
                             sct_show(m->cases[said->of].name).text);
            continue;
        }
        if (down == NULL) down = sct_fields_array(&r->f, m->n_joints, sizeof *down);
        if (down == NULL) return;
        add_loads(r, said, &m->cases[c], down);
        if (r->f.failure != SCT_OK) return;
    }
}
