/**
 * What a structure must do: every limit of the model in the form in which designs are judged, and the analysis of one
 * design against it. Used by checking, by the descent and by the choice of sections alike.
 */
#ifndef SCT_SIZING_DUTY_H
#define SCT_SIZING_DUTY_H

#include <math.h>

#include "analysis/slack.h"
#include "analysis/solver.h"
#include "sizing/bow.h"
#include "sizing/whole.h"

/* The sizes of all groups with their true properties. */
typedef struct sct_design {
    double *A;      /* [m2] n_groups */
    double (*i)[2]; /* [m] radii of gyration; NAN: not stated */
    double (*W)[2]; /* [m3] section moduli; NAN: not stated */
    double *J;      /* [m4] torsion constants; NAN: not stated */
    int *section;   /* index in the group's family; -1: an area */
} sct_design;

/* One deflection limit at one joint in one combination. */
typedef struct sct_deflection_row {
    int limit, joint, combination;
    int from; /* relative to this joint; -1: absolute */
} sct_deflection_row;

typedef struct sct_duty {
    const sct_structure *st; /* borrowed */
    sct_solver *solver;
    sct_slack *slack; /* of the latest analysis */
    sct_arena *arena;
    sct_bar_rule *rules;         /* n_bars */
    double *length;              /* [m] n_groups: of all members */
    double *unit_mass;           /* [kg/m2] n_groups: mass per unit area = density * length */
    int n_allowable, *allowable; /* combinations in which strength is checked */
    int n_rows;
    sct_deflection_row *rows;
    int n_bent, *bent; /* members that carry moments */
    int n_bows;
    sct_bow_row *bows;
    sct_member_lines *lines;
    sct_whole *whole; /* NULL: nothing to look at */
    bool has_whole;   /* it is that of the latest analysis */
    /* of the latest analysis */
    sct_response response;
    double *N;                 /* n_combinations x n_bars; forces below 1e-9 of the largest are given as 0 */
    double *S;                 /* n_combinations x n_springs: spring forces, those of members as in N */
    double *of_joints;         /* 12 n_joints: scratch */
    sct_properties *sizes;     /* n_groups: scratch */
    double *u;                 /* n_rows: displacement along the limit's direction */
    double *worst_compression; /* n_bars: [N] most compressive force in the strength combinations, <= 0 */
} sct_duty;

/** The larger of two utilisations; NAN counts as the largest, so that a number that is none never reads as a pass. */
static inline double sct_worse(double a, double b)
{
    return isnan(a) || b <= a ? a : b;
}

/** Is a limit kept at this utilisation? NAN: no. */
static inline bool sct_keeps(double utilisation)
{
    return utilisation <= 1.0 + SCT_KEPT_TO;
}

/** Duty, solver and work arrays for a structure. *status: SCT_OK, SCT_NO_MEMORY, SCT_TOO_LARGE; SCT_SELF_CHECK: a rule
 * without its numbers, which the reader should have refused. */
sct_duty *sct_duty_new(const sct_structure *st, sct_engine engine, sct_status *status);
void sct_duty_free(sct_duty *duty);

sct_status sct_design_new(sct_arena *arena, int n_groups, sct_design *design);
void sct_design_copy(int n_groups, const sct_design *from, sct_design *to);
sct_shape sct_design_shape(const sct_design *design, int group);
/** For the analysis; derivatives those of all properties together (d1 = d2 = P). */
sct_properties sct_design_properties(const sct_design *design, int group);
/** Puts a section, or an area with the group's relation, into the design. */
void sct_design_section(const sct_model *model, int group, int section, sct_design *design);
void sct_design_area(const sct_model *model, int group, double A, sct_design *design);

double sct_duty_mass(const sct_duty *duty, const sct_design *design);

/** Analyses and fills N, S, u, worst_compression. Status of sct_solver_analyse and sct_slack_find. Derivatives taken
 * from this analysis are those with respect to the ln of all of a size's properties together. */
sct_status sct_duty_analyse(sct_duty *duty, const sct_design *design);
/** The same with areas alone (sct_properties_at_area), and with properties that have derivatives of their own. */
sct_status sct_duty_analyse_areas(sct_duty *duty, const double A[]);
sct_status sct_duty_analyse_sizes(sct_duty *duty, const sct_properties sizes[]);
/** The same sums from duty->response as it stands (after refinement); slack bars are found first. Status of
 * sct_slack_find. */
sct_status sct_duty_gather(sct_duty *duty);

/** Is the bar in compression in some strength combination of the latest analysis? */
bool sct_duty_is_compressed(const sct_duty *duty, int bar);

/** Largest utilisation of one member at the forces of the latest analysis, with the given size. */
double sct_duty_bar_utilisation(const sct_duty *duty, int bar, const sct_shape *shape);

/** A member that carries moments in one combination, at the latest analysis. */
sct_bent_member sct_duty_bent_member(const sct_duty *duty, int bar, int combination);

/** Utilisation of one row of a bow limit with the given size. */
double sct_duty_bow_utilisation(const sct_duty *duty, int row, const sct_shape *shape);

/** The displacement of one deflection row. */
sct_form sct_duty_deflection_form(const sct_duty *duty, int row);

/** Utilisation of one deflection row at the latest analysis. */
double sct_duty_row_utilisation(const sct_duty *duty, int row);

/** Critical load factors and frequency of the latest analysis, looked for when they are asked for. how: COLD while
 * searching, PROVEN for what is reported. */
sct_status sct_duty_find_whole(sct_duty *duty, sct_mode_search how);

/** Largest utilisation of all bars, rows, bows, and of limits on the whole at the latest analysis. */
double sct_duty_utilisation(const sct_duty *duty, const sct_design *design);
#endif
