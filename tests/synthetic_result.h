/* A finished result made by hand, for tests of the writers: two bars that carry a load between two supports. */
#ifndef TESTS_SYNTHETIC_RESULT_H
#define TESTS_SYNTHETIC_RESULT_H

#include <math.h>
#include <string.h>

#include "scantling.h"

typedef struct synthetic {
    sct_joint_result joints[3];
    sct_member_result members[2];
    sct_group_result groups[2];
    const char *combinations[2];
    bool is_for_strength[2];
    const char *warnings[1];
    double u[18], reaction[18], N[4], load[18];
    sct_deflection_result deflections[1];
    sct_start_result starts[3];
    sct_price prices[1];
    sct_result result;
} synthetic;

static inline sct_result *synthetic_result(synthetic *s)
{
    memset(s, 0, sizeof *s);
    s->joints[0] = (sct_joint_result){"A", {0, 0, 0}, 2, {{1, 0, 0}, {0, 1, 0}}};
    s->joints[1] = (sct_joint_result){"B", {6, 0, 0}, 1, {{0, 1, 0}}};
    s->joints[2] = (sct_joint_result){"C", {3, 1.5, 0}, 0, {{0}}};
    s->groups[0] =
        (sct_group_result){"rafter", "S355H", "CHS 60.3x4", false, 1, 707.5e-6,        {2.8e-7, 2.8e-7}, 0.0603,
                           3.25,     5.554,   18.05,        6e-4,  0, .W = {NAN, NAN}, .J = NAN};
    s->groups[1] = (sct_group_result){"strut", "S355H", NULL,  true, 1, 0.001,           {NAN, NAN}, 0,
                                      3.0,     7.85,    23.55, NAN,  1, .W = {NAN, NAN}, .J = NAN};
    s->members[0] = (sct_member_result){
        "R1",   0,       0,        2, 3.25, {3.25, 1.5}, {163.25, 75.1},  18.05, SCT_CHECK_BUCKLING_IN, 1, -45.26e3,
        0.9301, 12.04e3, -45.26e3, 0, 1,    true,        .is_bent = false};
    s->members[1] = (sct_member_result){"R2", 1,   2,    1,   3.0, {3.0, 3.0}, {NAN, NAN}, 23.55, SCT_CHECK_TENSION,
                                        0,    8e3, 0.25, 8e3, 1e3, 0,          1,          false, .is_bent = false};
    s->combinations[0] = "S1";
    s->combinations[1] = "W";
    s->is_for_strength[0] = s->is_for_strength[1] = true;
    s->warnings[0] = "buckling is not checked";
    s->N[0] = 12.04e3, s->N[1] = 8e3, s->N[2] = -45.26e3, s->N[3] = 1e3;
    s->u[7] = -0.0183, s->u[16] = 0.001;
    s->reaction[0] = -3e3, s->reaction[1] = 20e3, s->reaction[4] = 20e3, s->reaction[9] = 0.01, s->reaction[10] = -5e3;
    s->load[7] = -40e3;
    s->deflections[0] = (sct_deflection_result){0, 2, 0, {0, 1, 0}, -0.0183, 0.02, 0.915, "L/300", .from = -1};
    s->starts[0] = (sct_start_result){41.60, 0, 1e-9, 9, 8, SCT_OPTIMUM};
    s->starts[1] = (sct_start_result){41.6000001, 0, 1e-9, 9, 8, SCT_OPTIMUM};
    s->starts[2] = (sct_start_result){45.0, 0.1, 1e-2, 100, 99, SCT_STALLED};
    s->prices[0] =
        (sct_price){SCT_CHECK_DEFLECTION, -1, 0, 12.5, -3100, 3.1, "1 mm more deflection (L/300 at C) saves 3.1 kg"};
    s->result = (sct_result){
        .outcome = SCT_SECTIONS_FOUND,
        .kept = true,
        .title = "Grain store, truss line 4",
        .dimensions = 2,
        .n_joints = 3,
        .n_members = 2,
        .n_groups = 2,
        .n_combinations = 2,
        .n_cases = 2,
        .joints = s->joints,
        .members = s->members,
        .groups = s->groups,
        .combinations = s->combinations,
        .is_for_strength = s->is_for_strength,
        .warnings = s->warnings,
        .settings = {.starts = 3, .seed = 1, .iterations = 100, .tolerance = 1e-6},
        .u = s->u,
        .reaction = s->reaction,
        .N = s->N,
        .load = s->load,
        .n_deflections = 1,
        .deflections = s->deflections,
        .mass = 41.6,
        .mass_continuous = 38.2,
        .utilisation = 0.9301,
        .kkt = 1e-9,
        .violation = 0,
        .analyses = 121,
        .n_starts = 3,
        .starts = s->starts,
        .best_start = 0,
        .n_prices = 1,
        .prices = s->prices,
        .accuracy = {3e-16, 2e-13, 4e-12},
        .verdict = "41.6 kg: sections found that keep every limit in both combinations.",
    };
    return &s->result;
}
#endif
