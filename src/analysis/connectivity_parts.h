/* The steps of connectivity.c, one file each. Only for these files. */
#ifndef SCT_ANALYSIS_CONNECTIVITY_PARTS_H
#define SCT_ANALYSIS_CONNECTIVITY_PARTS_H

#include "analysis/structure.h"
#include "base/text.h"
#include "numerics/span.h"

/* Sine of the angle (or lever arm as a fraction of the part's size) below which a member or a support is no hold: it
 * would give 1e-18 of a good one's stiffness, below the rounding of any coordinate that a person measures. */
static const double SCT_NO_HOLD = 1e-9;

/* Displacements of one joint, with the rotations that go with them, that its members and supports do not hold. h in its
 * unknowns, rotations times the lever, Gauss-Jordan form: 1 at the pivot, a displacement. */
typedef struct sct_loose {
    int n, pivot[3];
    double h[3][SCT_ROW];
} sct_loose;

typedef struct sct_part {
    int first, count;    /* its joints: graph.joints[first ... first + count - 1] */
    int n_held, n_turns; /* directions and rotations held by rigid or elastic supports, all its joints together */
    double centre[3];    /* [m] */
    double size;         /* [m] largest distance of a joint from the centre */
} sct_part;

typedef struct sct_graph {
    const sct_structure *st;
    sct_issues *issues;
    bool *ground;        /* n_dof, out: one unknown held per motion */
    int n_found, n_told; /* motions, messages */
    int *part_of;        /* n_joints; -1: no member ends there */
    int *joints;         /* joints by part */
    int *at, *bars;      /* bars at joint j: bars[at[j] ... at[j + 1] - 1] */
    int *support;        /* n_joints + 1: elastic supports of joint j are springs support[j] ... support[j + 1] - 1 */
    int n_parts;
    sct_part *parts;
    sct_loose *loose; /* n_joints */
    sct_row *rows;    /* scratch: most springs of all joints, each twice, and held directions, + 1 */
    double *motion;   /* scratch: SCT_ROW x n_dof */
} sct_graph;

/** joint_graph.c: bars and supports by joint, joints by part. false: out of memory; free it all the same. */
bool sct_graph_build(sct_graph *g, const sct_structure *st);
void sct_graph_free(sct_graph *g);

/** Unknowns of a joint, displacements first. */
int sct_graph_unknowns(const sct_graph *g, int joint);

/** The vector whose product with the rotation of a joint is its share in the elongation of a spring of a member there.
 * Zero: no share. */
void sct_graph_turn(const sct_graph *g, const sct_spring *spring, int joint, double a[3]);

/** The springs of member e: number k = 0, 1, ...; NULL behind the last. */
const sct_spring *sct_graph_spring(const sct_graph *g, int e, int k);

/** loose_joints.c: finds and tells all loose joints of parts that have a support (without one, that is the thing to
 * say). SCT_OK, SCT_NO_MEMORY. */
sct_status sct_check_loose_joints(sct_graph *g);

/** rigid_motions.c: tells the rigid motions of a part that supports leave free; a part without any support in so many
 * words when `name_unsupported`. SCT_OK, SCT_NO_MEMORY. */
sct_status sct_check_rigid_motions(sct_graph *g, sct_part *part, bool name_unsupported);
#endif
