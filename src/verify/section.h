/* The size of a group, read from the model by code of its own. */
#ifndef SCT_VERIFY_SECTION_H
#define SCT_VERIFY_SECTION_H

#include "model/model.h"

/* [m2], [m4], [m3], [m4]; I and W in plane, out of plane; NAN: not stated. */
typedef struct sct_verify_section {
    double A, I[2], W[2], J;
} sct_verify_section;

/** Of a group that holds a section or an area; A is NAN for others. */
sct_verify_section sct_verify_section_of(const sct_model *model, int group);
#endif
