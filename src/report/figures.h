/* The figures of a drawing, one below the other: utilisations, deflected shape, diagrams, flat views. */
#ifndef SCT_REPORT_FIGURES_H
#define SCT_REPORT_FIGURES_H

#include "loads.h"
#include "scene.h"

/* Where things go on the sheet. */
typedef struct sct_layout {
    double width;
    bool is_beside;   /* tables and legend at the right of a tall figure, not below it */
    sct_point corner; /* of the joints; y is the figure's own */
    double figure_width, figure_height;
} sct_layout;

static const double SHEET_MARGIN = 20, PANEL = 292, PANEL_GAP = 30; /* [u] */

/* Each puts its figure on the page with its top at *y and moves *y to its bottom. SCT_NO_MEMORY. */

/** The structure with the utilisation of its members and all labels; *loads: what was drawn of these. */
sct_status sct_figure_utilisations(sct_scene *scene, const sct_layout *l, sct_sheet *page, double *y,
                                   sct_loads_drawn *loads);
/** The deflected shape under its heading; nothing where nothing moves. */
sct_status sct_figure_deflected(sct_scene *scene, const sct_layout *l, sct_sheet *page, double *y);
/** The diagrams asked for, each under its heading. */
sct_status sct_figure_diagrams(sct_scene *scene, const sct_layout *l, sct_sheet *page, double *y);
/** Whether a structure gets flat views: in space, with few enough members to be told apart. */
bool sct_figure_has_views(const sct_result *result);
/** A space structure seen along y, against x and from above, to one scale, with dimensions. */
sct_status sct_figure_views(const sct_scene *scene, const sct_layout *l, sct_sheet *page, double *y);

/** The name of the combination that is shown, cut to a line. */
void sct_figure_combination(const sct_scene *scene, char out[128]);
#endif
