/* Motions in words: joints and directions as a person reads them. */
#include "analysis/motion.h"

#include <math.h>

static const double ALONG_AXIS = 1e-6; /* sine of the angle up to which a direction is called by its axis */
static const double FOOT = 0.3048;     /* [m] exact, international foot (from memory) */

void sct_motion_direction(sct_text *text, int dim, const double d[3], bool has_sense)
{
    static const char *const AXES[] = {"x", "y", "z"};
    const double length = sqrt(d[0] * d[0] + d[1] * d[1] + d[2] * d[2]);
    int first = -1;
    for (int i = 0; i < 3; i++) {
        const double across = hypot(d[(i + 1) % 3], d[(i + 2) % 3]);
        if (across <= ALONG_AXIS * length) {
            if (has_sense && d[i] < 0.0) sct_text_add(text, "-");
            sct_text_add(text, AXES[i]);
            return;
        }
        if (first < 0 && fabs(d[i]) > ALONG_AXIS * length) first = i;
    }
    const bool turn = !has_sense && first >= 0 && d[first] < 0.0; /* the first component is shown positive */
    const double scale = (turn ? -1.0 : 1.0) / length;
    for (int i = 0; i < dim; i++) {
        sct_text_add(text, i == 0 ? "(" : ", ");
        sct_text_fixed(text, d[i] * scale, 2);
    }
    sct_text_add(text, ")");
}

void sct_motion_point(sct_text *text, const sct_model *model, const double at[3])
{
    for (int i = 0; i < model->dimensions; i++) {
        const double shown = model->us_customary ? at[i] / FOOT : at[i];
        sct_text_format(text, "%s%.6g", i == 0 ? "(" : ", ", fabs(shown) < 1e-9 ? 0.0 : shown);
    }
    sct_text_add(text, model->us_customary ? ") ft" : ") m");
}

void sct_motion_name(sct_text *text, const char *name)
{
    sct_text_add(text, "\"");
    sct_text_plain(text, name, 64);
    sct_text_add(text, "\"");
}

bool sct_motion_is_frame(const sct_model *model)
{
    const int n_turns = model->dimensions == 2 ? 1 : SCT_TURNS;
    for (int e = 0; e < model->n_members; e++) {
        for (int r = 0; r < n_turns; r++) {
            const sct_member_end *end = model->members[e].end;
            if (end[0].fixity[r] != SCT_PINNED || end[1].fixity[r] != SCT_PINNED) return true;
        }
    }
    return false;
}

bool sct_motion_tell(sct_text *text, sct_severity severity, sct_where where, sct_issues *issues)
{
    const bool whole = !text->failed && text->data != NULL;
    if (whole) sct_issue_add(issues, severity, where, "%s", text->data);
    sct_text_free(text);
    return whole;
}
