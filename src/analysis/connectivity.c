/* Mechanisms that geometry alone shows: parts, their supports, and joints that their own members do not hold. */
#include "analysis/connectivity.h"

#include <string.h>

#include "analysis/connectivity_parts.h"
#include "analysis/motion.h"

static bool warn_of_parts(const sct_graph *g)
{
    const sct_joint *joints = g->st->model->joints;
    sct_text text = {0};
    sct_text_format(&text, "the structure falls into %d parts without connection to each other: those with joints ",
                    g->n_parts);
    for (int p = 0; p < g->n_parts && p < 10; p++) {
        if (p > 0) sct_text_add(&text, ", ");
        sct_motion_name(&text, joints[g->joints[g->parts[p].first]].name);
    }
    if (g->n_parts > 10) sct_text_format(&text, " and %d more", g->n_parts - 10);
    return sct_motion_tell(&text, SCT_WARNING, joints[g->joints[g->parts[0].first]].where, g->issues);
}

static sct_status check_graph(sct_graph *g)
{
    const sct_structure *st = g->st;
    int n_supported = 0;
    for (int p = 0; p < g->n_parts; p++) n_supported += g->parts[p].n_held + g->parts[p].n_turns > 0;
    const bool some_support = n_supported > 0;
    if (g->n_parts > 0 && !some_support) {
        sct_issue_add(g->issues, SCT_ERROR, st->model->joints[g->joints[0]].where,
                      "the structure has no support; hold at least %d directions", st->dim == 2 ? 3 : 6);
        g->n_told++;
    }
    sct_status status = sct_check_loose_joints(g);
    for (int p = 0; p < g->n_parts && status == SCT_OK; p++)
        status = sct_check_rigid_motions(g, &g->parts[p], some_support);
    const bool unsaid = n_supported == g->n_parts || !some_support; /* else the errors name the parts */
    if (status == SCT_OK && g->n_parts > 1 && unsaid && !warn_of_parts(g)) status = SCT_NO_MEMORY;
    return status;
}

sct_status sct_connectivity_check(const sct_structure *st, bool ground[], int *n_found, int *n_told, sct_issues *issues)
{
    sct_graph g = {.issues = issues, .ground = ground};
    memset(ground, 0, (size_t)st->n_dof * sizeof *ground);
    const sct_status status = sct_graph_build(&g, st) ? check_graph(&g) : SCT_NO_MEMORY;
    *n_found = g.n_found;
    *n_told = g.n_told;
    sct_graph_free(&g);
    return status;
}
