#include "report/csv_bent.h"

#include "report/json_bent.h"
#include "report/shown.h"

/* What stands in a column; `index` is an axis, or the place in the numbers of an end. */
typedef enum field {
    FIELD_PLACE,
    FIELD_MOMENT,
    FIELD_MODULUS,
    FIELD_MOST,
    FIELD_MOST_AT,
    FIELD_MOST_IN,
    FIELD_BOW,
    FIELD_END_COMBINATION, /* from here on: ends */
    FIELD_END_JOINT,
    FIELD_END
} field;

static const struct {
    const char *head;
    sct_display unit;
    field field;
    int index;
} COLUMNS[] = {
    {"place", SCT_SHOWN_LENGTH, FIELD_PLACE, 0},
    {"moment in plane", SCT_SHOWN_MOMENT, FIELD_MOMENT, 0},
    {"moment out of plane", SCT_SHOWN_MOMENT, FIELD_MOMENT, 1},
    {"section modulus in plane", SCT_SHOWN_SECTION_MODULUS, FIELD_MODULUS, 0},
    {"section modulus out of plane", SCT_SHOWN_SECTION_MODULUS, FIELD_MODULUS, 1},
    {"largest moment in plane", SCT_SHOWN_MOMENT, FIELD_MOST, 0},
    {"largest moment in plane at", SCT_SHOWN_LENGTH, FIELD_MOST_AT, 0},
    {"largest moment in plane in", SCT_SHOWN_COUNT, FIELD_MOST_IN, 0},
    {"largest moment out of plane", SCT_SHOWN_MOMENT, FIELD_MOST, 1},
    {"largest moment out of plane at", SCT_SHOWN_LENGTH, FIELD_MOST_AT, 1},
    {"largest moment out of plane in", SCT_SHOWN_COUNT, FIELD_MOST_IN, 1},
    {"bow in plane", SCT_SHOWN_DEFLECTION, FIELD_BOW, 0},
    {"bow out of plane", SCT_SHOWN_DEFLECTION, FIELD_BOW, 1},
    {"end in combination", SCT_SHOWN_COUNT, FIELD_END_COMBINATION, 0},
    {"end at", SCT_SHOWN_COUNT, FIELD_END_JOINT, 0},
    {"end N", SCT_SHOWN_FORCE, FIELD_END, 0},
    {"end V in plane", SCT_SHOWN_FORCE, FIELD_END, 1},
    {"end V out of plane", SCT_SHOWN_FORCE, FIELD_END, 2},
    {"end M in plane", SCT_SHOWN_MOMENT, FIELD_END, 3},
    {"end M out of plane", SCT_SHOWN_MOMENT, FIELD_END, 4},
    {"end torsion", SCT_SHOWN_MOMENT, FIELD_END, 5},
};
enum { N_COLUMNS = (int)(sizeof COLUMNS / sizeof COLUMNS[0]) };

void sct_csv_bent_head(sct_text *out, const sct_result *r)
{
    for (int i = 0; r->has_bent && i < N_COLUMNS; i++) {
        sct_text_format(out, ",%s", COLUMNS[i].head);
        if (COLUMNS[i].unit != SCT_SHOWN_COUNT)
            sct_text_format(out, " [%s]", sct_shown_unit(COLUMNS[i].unit, r->us_customary));
    }
}

static void add_combination(sct_text *out, const sct_result *r, int combination)
{
    if (combination >= 0) sct_csv_text(out, r->combinations[combination]);
}

static void add_of_member(sct_text *out, const sct_result *r, const sct_member_result *m, int column)
{
    const int axis = COLUMNS[column].index;
    const sct_display unit = COLUMNS[column].unit;
    const bool us = r->us_customary;
    switch (COLUMNS[column].field) {
    case FIELD_PLACE:
        if (m->combination >= 0) sct_text_shown(out, m->x, unit, us);
        break;
    case FIELD_MOMENT:
        if (m->combination >= 0) sct_text_shown(out, m->M[axis], unit, us);
        break;
    case FIELD_MODULUS: sct_text_shown(out, r->groups[m->group].W[axis], unit, us); break;
    case FIELD_MOST: sct_text_shown(out, m->M_most[axis], unit, us); break;
    case FIELD_MOST_AT: sct_text_shown(out, m->M_most_at[axis], unit, us); break;
    case FIELD_MOST_IN: add_combination(out, r, m->M_most_in[axis]); break;
    case FIELD_BOW: sct_text_shown(out, m->bow[axis], unit, us); break;
    case FIELD_END_COMBINATION:
    case FIELD_END_JOINT:
    case FIELD_END: break;
    }
}

void sct_csv_bent_member(sct_text *out, const sct_result *r, const sct_member_result *member)
{
    for (int i = 0; r->has_bent && i < N_COLUMNS; i++) {
        sct_text_add(out, ",");
        if (member != NULL && member->is_bent) add_of_member(out, r, member, i);
    }
}

void sct_csv_bent_end(sct_text *out, const sct_result *r, int combination, int member, int end)
{
    const double *numbers = sct_end_forces(r, combination, member, end);
    const int joint = end == 0 ? r->members[member].from : r->members[member].to;
    for (int i = 0; r->has_bent && i < N_COLUMNS; i++) {
        sct_text_add(out, ",");
        if (COLUMNS[i].field == FIELD_END_COMBINATION) add_combination(out, r, combination);
        if (COLUMNS[i].field == FIELD_END_JOINT) sct_csv_text(out, r->joints[joint].name);
        if (COLUMNS[i].field == FIELD_END)
            sct_text_shown(out, numbers[COLUMNS[i].index], COLUMNS[i].unit, r->us_customary);
    }
}
