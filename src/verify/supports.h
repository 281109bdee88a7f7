/* What supports hold of each joint, and what they leave free, as projections. */
#ifndef SCT_VERIFY_SUPPORTS_H
#define SCT_VERIFY_SUPPORTS_H

#include "verify/element.h"

/* [0] displacements, [1] rotations: only where some member's end takes part in one, else NULL. n_joints each. What is
 * neither held nor free concerns nobody: joints without members, rotations that no member's end takes part in. */
typedef struct sct_supports {
    double (*held[2])[3][3], (*free[2])[3][3];
} sct_supports;

/** SCT_OK, SCT_NO_MEMORY; free in either case. */
sct_status sct_supports_find(const sct_model *model, int n_elements, const sct_element elements[], bool with_turns,
                             sct_supports *supports);
void sct_supports_free(sct_supports *supports);
#endif
