/* Sections that grow in proportion: every property is a number times a power of the area. */
#ifndef SCT_MODEL_SHAPES_H
#define SCT_MODEL_SHAPES_H

typedef enum sct_shape_kind {
    SCT_SHAPE_RECTANGLE,   /* ratio: depth (in plane) to width */
    SCT_SHAPE_SQUARE_BAR,  /* no ratio */
    SCT_SHAPE_ROUND_BAR,   /* no ratio */
    SCT_SHAPE_SQUARE_TUBE, /* ratio: outer width to wall, > 2 */
    SCT_SHAPE_ROUND_TUBE,  /* ratio: outer diameter to wall, > 2 */
    SCT_SHAPES
} sct_shape_kind;

/* I = c_I A^2 and W = c_W A^1.5 in plane and out of plane, J = c_J A^2. */
typedef struct sct_shape {
    double c_I[2], c_W[2], c_J;
} sct_shape;

sct_shape sct_shape_of(sct_shape_kind kind, double ratio);
#endif
