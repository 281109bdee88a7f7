/* Worked lines: words with numbers put in, so that each can be done again by hand. Inputs and intermediates carry five
 * significant digits: a line recomputes from what it shows. */
#ifndef SCT_REPORT_WORKED_H
#define SCT_REPORT_WORKED_H

#include "base/text.h"
#include "rules/allowable.h"
#include "scantling.h"

/* Units of a worked line: stresses, section lengths and forces that fit each other. */
typedef struct sct_hand_units {
    double stress, length, force;
    const char *stress_name, *length_name, *force_name;
} sct_hand_units;

sct_hand_units sct_hand_units_of(bool us_customary);

/* The parts that every line needs. */
typedef struct sct_worked {
    sct_text *out;
    const sct_result *r;
    const sct_model *model;
    const sct_member_result *m;
    const sct_group_result *g;
    sct_hand_units in;
    sct_bar_rule rule;
    double i[2];
    int first_column; /* its width */
} sct_worked;

/** Words with numbers put in: # takes the next number, $ is the unit of stress, @ of length, ! of force. */
void sct_worked_line(sct_worked *s, const char *words, const double numbers[]);
/** What a line is about; "" where it goes on. */
void sct_worked_first_column(sct_worked *s, const char *words);
/** " = 0.93  passes" and the end of the line. */
void sct_worked_verdict(sct_worked *s, double utilisation);
#endif
