/* A truss laid out on a sheet, before ink: where joints and members come to lie, how wide each member is drawn, and
 * which marks, values and names the density allows. The same for plane and space. */
#ifndef SCT_REPORT_SCENE_H
#define SCT_REPORT_SCENE_H

#include "base/arena.h"
#include "labels.h"
#include "scantling.h"
#include "sheet.h"

/* Which force a member carries, where its check governs; SENSE_BENT: bending above all. */
typedef enum sct_sense { SENSE_NONE, SENSE_TENSION, SENSE_COMPRESSION, SENSE_BENT } sct_sense;
/* How an end is drawn: short of the ring of its joint; into a rigid joint; with a ring or a spring of its own. */
typedef enum sct_end { END_AT_RING, END_RIGID, END_RELEASED, END_SPRUNG } sct_end;
typedef enum sct_detail { DETAIL_FULL, DETAIL_SELECTIVE, DETAIL_OVERVIEW } sct_detail;

typedef struct sct_stick { /* a member on the sheet */
    sct_point from, to;    /* joints */
    double length, depth;  /* [u] between joints, across */
    double away;           /* [m] distance of its middle from the viewer, in space */
    sct_sense sense;       /* in its governing combination */
    bool is_far;           /* in space: behind the middle of the body */
    bool is_labelled;
    sct_end end[2];
    double outside; /* +1 or -1: the free side of a chord, along the normal (-dy, dx); 0: a web */
} sct_stick;

typedef struct sct_scene {
    const sct_result *result;
    sct_write_options options; /* combination filled in */
    sct_arena *arena;
    sct_labels *labels;
    sct_sheet sheet;
    double scale;        /* [u/m] */
    sct_point *at;       /* joints on the sheet */
    double *away;        /* [m] joints, distance from the viewer; 0 in a plane */
    sct_point low, high; /* bounds of the joints */
    sct_stick *sticks;
    double *lengths;        /* scratch, one per member */
    int *near_start, *near; /* members at joint j: near[near_start[j]] to near[near_start[j + 1] - 1] */
    bool *is_named;         /* joints */
    bool *is_rigid;         /* joints where a member's end does not turn freely: they have no ring */
    sct_detail detail;
    double ring;         /* [u] radius of a joint */
    double depth_factor; /* depths drawn x this; 0: not to scale */
    double given_factor; /* of another figure on the sheet; 0: choose one */
    bool is_widened;     /* some thin members are drawn at the smallest width */
    double turn, tilt;   /* [rad] of the axonometric view; 0 in a plane */
    bool is_flat;        /* seen straight along an axis of the model: a plane model always */
    int axis[2];         /* of a flat view: the axes to the right and upwards */
} sct_scene;

/** Joints of the result on the plane of the sheet [m, y down]: x and -y for a plane truss; axonometric with turn and
 * tilt for a space truss, then away[] tells the distance from the viewer. */
void sct_project(const sct_result *result, double turn, double tilt, sct_point at[], double away[]);
/** A flat view of a space structure, into scene->at and away: axis[0] to the right, axis[1] upwards. */
void sct_project_flat(sct_scene *scene, int across, int up);
/** One direction likewise. */
sct_point sct_project_direction(const sct_scene *scene, const double direction[3]);

/** Prepares what does not depend on the scale. SCT_NO_MEMORY. */
sct_status sct_scene_open(sct_scene *scene, const sct_result *result, const sct_write_options *options);
void sct_scene_close(sct_scene *scene);

/** Lays the projected joints (metres, in scene->at) into the box at `corner`, as large as width and height allow and
 * not blown up beyond reason; centred across. Fills everything from `scale` on except labels. */
void sct_scene_lay(sct_scene *scene, sct_point corner, double width, double height);

/** The same at a given scale [u/m], the upper left corner of the joints at `corner`. */
void sct_scene_lay_to_scale(sct_scene *scene, sct_point corner, double scale);

/** The detail that a drawing at `scale` would have. */
sct_detail sct_scene_detail(const sct_scene *scene, double scale);

/** The role of the ramp for a utilisation; ROLE_OVER above 1. */
sct_role sct_ramp(double utilisation);
#endif
