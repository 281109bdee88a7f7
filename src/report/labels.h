/* Placing labels so that none lies on another: knows rectangles and candidates only, nothing of what they mean. */
#ifndef SCT_REPORT_LABELS_H
#define SCT_REPORT_LABELS_H

#include <stdbool.h>

#include "sheet.h"

/* A rectangle at any angle: middle, unit vector along its length, half length and half height [u]. */
typedef struct sct_box {
    double x, y, c, s, a, b;
} sct_box;

sct_box sct_box_level(sct_point middle, double a, double b);
/** The rectangle about the line from p to q, `b` to either side. */
sct_box sct_box_about(sct_point p, sct_point q, double b);
/** True when the two come nearer than `clear` (separating axes). */
bool sct_boxes_meet(const sct_box *p, const sct_box *q, double clear);
/** Half the upright extent of a box across and down. */
sct_point sct_box_reach(const sct_box *box);

/* What a place may be taken by. Labels avoid both; a leader may cross a band. */
enum { SCT_SOLID = 1, SCT_BAND = 2 };

typedef struct sct_choice {
    sct_box box;
    double cost;
} sct_choice;

typedef struct sct_labels sct_labels;

/** Labels stay inside the frame from `corner` to `opposite`. NULL when out of memory. */
sct_labels *sct_labels_new(sct_point corner, sct_point opposite);
void sct_labels_free(sct_labels *labels);
/** True once memory ran out: places are then missing. */
bool sct_labels_failed(const sct_labels *labels);

/** Takes a place. `owner` (>= 0) names what it belongs to for sct_labels_crossed; -1: nothing. */
void sct_labels_block(sct_labels *labels, sct_box box, int kind, int owner);
/** True when the box is inside the frame and keeps clear of everything of the kinds. */
bool sct_labels_are_clear_of(sct_labels *labels, const sct_box *box, int kinds);
/** How many things of the kinds the box meets, those of `owner` not counted. */
int sct_labels_crossed(sct_labels *labels, const sct_box *box, int kinds, int owner);

/** Asks for one label at one of n places; returns its number, from 0 in order of asking (-1: out of memory). */
int sct_labels_ask(sct_labels *labels, const sct_choice choices[], int n);
/** Places what was asked since the last time: fewest choices first, each at its cheapest free place, then two passes
 * in which each may move. Placed labels then block. Ties: the order of asking. */
void sct_labels_settle(sct_labels *labels);
/** Which of its choices a label got; -1: none was free. */
int sct_labels_choice(const sct_labels *labels, int label);

/* The part of a line that a solid thing covers: fractions of its length. */
typedef struct sct_gap {
    double from, to;
} sct_gap;
/** Where the line from p to q runs within `clear` of solid things: at most `most` gaps, sorted, not overlapping. */
int sct_labels_gaps(const sct_labels *labels, sct_point p, sct_point q, double clear, sct_gap gaps[], int most);

/** The upright bounds of everything that was blocked or placed. */
void sct_labels_bounds(const sct_labels *labels, sct_point *corner, sct_point *opposite);
#endif
