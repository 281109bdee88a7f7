/* The section families that come with the program: models/sections, built in as text, read only when a model names one.
 */
#ifndef SCT_MODEL_FAMILIES_H
#define SCT_MODEL_FAMILIES_H

#include "base/arena.h"
#include "model/model.h"

/* One built-in file, as src/model/embed.sh writes it. */
typedef struct sct_shipped_family {
    const char *name;
    const char *text; /* `size` bytes of CSV */
    size_t size;
} sct_shipped_family;
extern const sct_shipped_family sct_shipped_families[];
extern const int sct_n_shipped_families;

/** The index of a shipped family; -1: none has this name. */
int sct_family_find(const char *name);

/**
 * Reads a shipped family: its sections, lightest first. The family's `where` is left empty.
 *
 * Columns: name; A_mm2; Iy_mm4 (or Iy_inplane_mm4), in plane; Iz_mm4 (or Iz_outplane_mm4), out of plane; D_mm, h_mm or
 * a_mm, the depth; where there are such columns, Wel_y_mm3 and Wel_z_mm3, the section moduli, and It_mm4 (or
 * It_thin_mm4), the torsion constant. SCT_OK, SCT_NO_MEMORY; SCT_SELF_CHECK: the built-in text is damaged.
 */
sct_status sct_family_load(const sct_shipped_family *shipped, sct_arena *arena, sct_family *family);

/** Sorts sections by area, lightest first; equal ones stay in their order. False when out of memory. */
bool sct_sections_sort(sct_section sections[], int n);
#endif
