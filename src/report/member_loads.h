/* The loads that the cases of a combination put on joints and members, added up as they are drawn: in the model's axes,
 * line loads per metre of member. Own weight is not among them. */
#ifndef SCT_REPORT_MEMBER_LOADS_H
#define SCT_REPORT_MEMBER_LOADS_H

#include "base/arena.h"
#include "scantling.h"

/* A line load, straight between a and b [m] from the start of a member [N/m]. */
typedef struct sct_line_load {
    int member;
    double a, b, qa[3], qb[3];
} sct_line_load;

/* A force and a moment at one place: of a member at x [m] from its start, or of a joint (member -1) [N], [N m]. */
typedef struct sct_point_load {
    int member, joint;
    double x, F[3], M[3];
} sct_point_load;

typedef struct sct_drawn_loads {
    int n_lines, n_points;
    sct_line_load *lines;   /* by member, then place */
    sct_point_load *points; /* of joints, then of members */
    bool has_weight;        /* own weight acts beside them */
} sct_drawn_loads;

/** All of them; in the arena. The result must have its model. SCT_NO_MEMORY. */
sct_status sct_drawn_loads_of(const sct_result *result, int combination, sct_arena *arena, sct_drawn_loads *out);
#endif
