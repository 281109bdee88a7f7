#include "report/json_bent.h"

static const char *const AXES[2] = {"in_plane", "out_of_plane"};

const double *sct_end_forces(const sct_result *r, int combination, int member, int end)
{
    return r->ends +
           (((size_t)combination * (size_t)r->n_members + (size_t)member) * 2 + (size_t)end) * SCT_END_NUMBERS;
}

static void both_combinations(sct_json *w, const char *name, const sct_result *r, const int combination[2])
{
    sct_json_key(w, name);
    sct_json_begin(w, "{");
    for (int axis = 0; axis < 2; axis++)
        sct_json_string(w, AXES[axis], combination[axis] >= 0 ? r->combinations[combination[axis]] : NULL);
    sct_json_end(w, "}");
}

static void fixities(sct_json *w, const sct_member_result *m)
{
    static const char *const ENDS[2] = {"from", "to"};
    static const char *const TURNS[3] = {"in_plane", "out_of_plane", "twist"};
    sct_json_key(w, "ends");
    sct_json_begin(w, "{");
    for (int end = 0; end < 2; end++) {
        sct_json_key(w, ENDS[end]);
        sct_json_begin(w, "{");
        for (int turn = 0; turn < 3; turn++)
            sct_json_string(w, TURNS[turn],
                            m->sprung[end][turn]   ? "sprung"
                            : m->hinged[end][turn] ? "pinned"
                                                   : "fixed");
        sct_json_end(w, "}");
    }
    sct_json_end(w, "}");
}

static void end_forces(sct_json *w, const sct_result *r, int member, int end, const char *name)
{
    static const char *const KEYS[SCT_END_NUMBERS] = {
        "force_N",   "shear_in_plane_N", "shear_out_of_plane_N", "moment_in_plane_Nm", "moment_out_of_plane_Nm",
        "torsion_Nm"};
    sct_json_key(w, name);
    sct_json_begin(w, "[");
    for (int c = 0; c < r->n_combinations; c++) {
        const double *numbers = sct_end_forces(r, c, member, end);
        sct_json_entry(w);
        sct_json_begin(w, "{");
        for (int i = 0; i < SCT_END_NUMBERS; i++) sct_json_number(w, KEYS[i], numbers[i]);
        sct_json_end(w, "}");
    }
    sct_json_end(w, "]");
}

void sct_json_bent_member(sct_json *w, const sct_result *r, int member)
{
    const sct_member_result *m = &r->members[member];
    sct_json_boolean(w, "is_bent", m->is_bent);
    fixities(w, m);
    if (!m->is_bent) return;
    sct_json_key(w, "local_axes");
    sct_json_begin(w, "[");
    for (int axis = 0; axis < 3; axis++) {
        sct_json_entry(w);
        sct_json_vector(w, m->axes[axis], r->dimensions);
    }
    sct_json_end(w, "]");
    sct_json_number(w, "place_m", m->x);
    sct_json_both_axes(w, "moment_Nm", m->M);
    sct_json_both_axes(w, "largest_moment_Nm", m->M_most);
    sct_json_both_axes(w, "largest_moment_at_m", m->M_most_at);
    both_combinations(w, "largest_moment_in", r, m->M_most_in);
    sct_json_both_axes(w, "largest_bow_m", m->bow);
    both_combinations(w, "largest_bow_in", r, m->bow_in);
    if (r->lowest_critical >= 0) {
        sct_json_both_axes(w, "share_of_lowest_buckling_mode", m->mode_share);
        sct_json_both_axes(w, "implied_effective_length_m", m->mode_Lcr);
    }
    if (r->ends == NULL) return;
    end_forces(w, r, member, 0, "at_from");
    end_forces(w, r, member, 1, "at_to");
}

void sct_json_bows(sct_json *w, const sct_result *r)
{
    sct_json_key(w, "bows");
    sct_json_begin(w, "[");
    for (int i = 0; i < r->n_bows; i++) {
        const sct_bow_result *b = &r->bows[i];
        sct_json_entry(w);
        sct_json_begin(w, "{");
        sct_json_whole(w, "limit", b->limit);
        sct_json_string(w, "member", r->members[b->member].name);
        sct_json_string(w, "run", b->run);
        sct_json_string(w, "combination", b->combination >= 0 ? r->combinations[b->combination] : NULL);
        sct_json_string(w, "axis", AXES[b->axis]);
        sct_json_number(w, "place_m", b->x);
        sct_json_number(w, "bow_m", b->v);
        sct_json_number(w, "at_most_m", b->at_most);
        sct_json_string(w, "at_most_as_written", b->label);
        sct_json_number(w, "utilisation", b->utilisation);
        sct_json_end(w, "}");
    }
    sct_json_end(w, "]");
}
