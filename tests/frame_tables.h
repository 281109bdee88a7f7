/* Building blocks of plane frames for tests against tables: kN, m, E = 210e6 kN/m2. */
#ifndef TESTS_FRAME_TABLES_H
#define TESTS_FRAME_TABLES_H

#include "frame_answers.h"

static const double ft_E = 210e6;

/* Areas so large that members keep their lengths, as tables assume, and not so large that digits are lost. */
static const double ft_rigid = 1e4;

static inline sct_model *ft_plane(void)
{
    sct_model *m = mb_new(2);
    mb_material(m, ft_E, 7850e-3, 12e-6);
    mb_case(m, 0.0);
    return m;
}

static inline void ft_foot(sct_model *m, int joint, bool is_fixed)
{
    if (is_fixed)
        mb_fix(m, joint);
    else
        mb_pin(m, joint);
}
#endif
