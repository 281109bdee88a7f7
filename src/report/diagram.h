/* Diagrams along members: bending moments on the side in tension, shear and axial forces to the left of the member's
 * direction where positive. One combination with hatch, or an envelope as two contours. */
#ifndef SCT_REPORT_DIAGRAM_H
#define SCT_REPORT_DIAGRAM_H

#include "scene.h"

typedef enum sct_diagram_kind { DIAGRAM_MOMENT, DIAGRAM_SHEAR, DIAGRAM_AXIAL } sct_diagram_kind;

typedef struct sct_diagram_of {
    sct_diagram_kind kind;
    int plane; /* of bending; 0 for axial forces */
    bool is_envelope;
} sct_diagram_of;

/** Draws it into scene->sheet and fills scene->labels, both emptied by the caller; `width` of the sheet. *drawn tells
 * whether there is anything to show. SCT_NO_MEMORY. */
sct_status sct_diagram_draw(sct_scene *scene, const sct_diagram_of *of, double width, bool *drawn);

/** What it shows: "Bending moment (full), kNm, on the side in tension". */
void sct_diagram_words(const sct_scene *scene, const sct_diagram_of *of, char *out, size_t room);
#endif
