/* What the files of the second analysis share while it runs. Only for these files. */
#ifndef SCT_VERIFY_WORK_H
#define SCT_VERIFY_WORK_H

#include "verify/matrix.h"
#include "verify/statics.h"

typedef struct sct_work {
    const sct_model *m;
    const sct_verify_section *sections;
    const bool *left_out; /* n_members, or NULL: none */
    sct_statics *out;
    int d;                         /* dimensions */
    int stride;                    /* 3 displacements per joint and, in frames, 3 rotations */
    int size, at[6];               /* unknowns per joint, and which of the six they are */
    size_t n;                      /* stride * n_joints */
    double lever;                  /* [m] mean length of a member: a rotation times this is beside a displacement */
    long double (*dir)[3], *L, *k; /* n_members */
    double *c[2];                  /* n_joints: stiffness that stands for a support, of displacements and rotations */
    sct_matrix *matrix;
    double *b;                           /* size * n_joints */
    double *step;                        /* n */
    long double *u, *settled, *load, *r; /* n each */
    long double *free_part;              /* n_members: prescribed free elongation */
    long double (*held)[12];             /* n_elements: what loads put on the joints */
} sct_work;

/** Fills and factors the matrix. SCT_OK; SCT_SELF_CHECK: no factor; SCT_NO_MEMORY, SCT_TOO_LARGE. */
sct_status sct_work_factor(sct_work *work);

/** step = P M^-1 P r, with the factor. */
void sct_work_solve(sct_work *work, const long double r[]);
#endif
