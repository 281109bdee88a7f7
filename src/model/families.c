/* The section families that come with the program. */
#include "families.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "base/number.h"
#include "csv.h"

int sct_family_find(const char *name)
{
    for (int i = 0; i < sct_n_shipped_families; i++)
        if (strcmp(sct_shipped_families[i].name, name) == 0) return i;
    return -1;
}

/* ---- sorting ---------------------------------------------------------------------------------------------------- */

typedef struct ranked {
    sct_section section;
    int order;
} ranked;

static int compare(const void *a, const void *b)
{
    const ranked *x = a, *y = b;
    if (x->section.A != y->section.A)
        return x->section.A < y->section.A ? -1 : 1; /* an order, not a test of equality */
    return (x->order > y->order) - (x->order < y->order);
}

bool sct_sections_sort(sct_section sections[], int n)
{
    if (n < 2) return true;
    ranked *list = calloc((size_t)n, sizeof *list);
    if (list == NULL) return false;
    for (int i = 0; i < n; i++) list[i] = (ranked){sections[i], i};
    qsort(list, (size_t)n, sizeof *list, compare);
    for (int i = 0; i < n; i++) sections[i] = list[i].section;
    free(list);
    return true;
}

/* ---- reading ---------------------------------------------------------------------------------------------------- */

/* The columns that are read, each under the first of its headings that stands in the first record. */
enum { NAME, AREA, IN_PLANE, OUT_OF_PLANE, DEPTH, N_NEEDED, W_IN_PLANE = N_NEEDED, W_OUT_OF_PLANE, TORSION, N_COLUMNS };
static const char *const HEADINGS[N_COLUMNS][3] = {
    [NAME] = {"name"},
    [AREA] = {"A_mm2"},
    [IN_PLANE] = {"Iy_mm4", "Iy_inplane_mm4"},
    [OUT_OF_PLANE] = {"Iz_mm4", "Iz_outplane_mm4"},
    [DEPTH] = {"h_mm", "D_mm", "a_mm"},
    [W_IN_PLANE] = {"Wel_y_mm3"},
    [W_OUT_OF_PLANE] = {"Wel_z_mm3"},
    [TORSION] = {"It_mm4", "It_thin_mm4"},
};

static bool find_columns(const sct_csv *csv, int column[N_COLUMNS])
{
    for (int i = 0; i < N_COLUMNS; i++) {
        column[i] = -1;
        for (int k = 0; k < 3 && column[i] < 0 && HEADINGS[i][k] != NULL; k++)
            column[i] = sct_csv_column(csv, HEADINGS[i][k]);
        if (i < N_NEEDED && column[i] < 0) return false;
    }
    return true;
}

static bool read_positive(const sct_csv *csv, int column, double *value)
{
    const char *text = csv->field[column];
    return sct_number_read(text, strlen(text), value) && *value > 0;
}

/* A value in its SI unit; NAN where there is no such column. False: it is no number above zero. */
static bool read_optional(const sct_csv *csv, int column, double per_unit, double *value)
{
    *value = (double)NAN;
    if (column < 0) return true;
    const bool read = read_positive(csv, column, value);
    *value /= per_unit;
    return read;
}

/* One record as a section; false: damaged. The name is left in the record. */
static bool read_section(const sct_csv *csv, const int column[N_COLUMNS], sct_section *section)
{
    double A_mm2, Iy_mm4, Iz_mm4, depth_mm;
    for (int i = 0; i < N_COLUMNS; i++)
        if (column[i] >= csv->n) return false;
    if (csv->field[column[NAME]][0] == '\0' || !read_positive(csv, column[AREA], &A_mm2) ||
        !read_positive(csv, column[IN_PLANE], &Iy_mm4) || !read_positive(csv, column[OUT_OF_PLANE], &Iz_mm4) ||
        !read_positive(csv, column[DEPTH], &depth_mm))
        return false;
    section->A = A_mm2 / 1e6;
    section->I[SCT_IN_PLANE] = Iy_mm4 / 1e12;
    section->I[SCT_OUT_OF_PLANE] = Iz_mm4 / 1e12;
    section->depth = depth_mm / 1e3;
    return read_optional(csv, column[W_IN_PLANE], 1e9, &section->W[SCT_IN_PLANE]) &&
           read_optional(csv, column[W_OUT_OF_PLANE], 1e9, &section->W[SCT_OUT_OF_PLANE]) &&
           read_optional(csv, column[TORSION], 1e12, &section->J);
}

/* 0: damaged. */
static int count_records(sct_csv *csv, const sct_shipped_family *shipped)
{
    int n = 0;
    sct_csv_start(csv, shipped->text, shipped->size);
    while (sct_csv_next(csv)) n++;
    return csv->fault == NULL ? n : 0;
}

sct_status sct_family_load(const sct_shipped_family *shipped, sct_arena *arena, sct_family *family)
{
    sct_csv csv;
    int column[N_COLUMNS];
    const int n = count_records(&csv, shipped) - 1; /* the first holds the headings */
    sct_csv_start(&csv, shipped->text, shipped->size);
    if (n < 1) return SCT_SELF_CHECK;
    sct_csv_next(&csv);
    if (!find_columns(&csv, column)) return SCT_SELF_CHECK;
    *family = (sct_family){.name = shipped->name, .n = n};
    family->sections = sct_arena_array(arena, (size_t)n, sizeof *family->sections);
    if (family->sections == NULL) return SCT_NO_MEMORY;
    for (int i = 0; i < n; i++) {
        sct_section *section = &family->sections[i];
        sct_csv_next(&csv);
        if (!read_section(&csv, column, section)) return SCT_SELF_CHECK;
        const char *name = csv.field[column[NAME]];
        section->name = sct_arena_string(arena, name, strlen(name));
        if (section->name == NULL) return SCT_NO_MEMORY;
    }
    return sct_sections_sort(family->sections, n) ? SCT_OK : SCT_NO_MEMORY;
}
