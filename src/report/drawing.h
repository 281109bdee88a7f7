/* drawing.svg: a truss or frame with the mark and utilisation of its members, self-contained, light and dark. */
#ifndef SCT_REPORT_DRAWING_H
#define SCT_REPORT_DRAWING_H

#include "base/text.h"
#include "scantling.h"

/**
 * Appends the drawing of a finished result.
 *
 * options  may be NULL (defaults); loads, deflected shape and diagrams show `combination`, or the worst for deflection when
 *          it is -1 or unknown
 * out      gains one SVG document; the same result gives the same bytes
 *
 * SCT_NO_MEMORY.
 */
sct_status sct_drawing_svg(const sct_result *result, const sct_write_options *options, sct_text *out);
#endif
