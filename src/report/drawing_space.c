/* What a space truss has of its own. */
#include "drawing_space.h"

#include <math.h>
#include <stdlib.h>

#include "band.h"
#include "base/number.h"
#include "quantity.h"
#include "symbols.h"

static const double RADIAN = 0.017453292519943295;
static const double TURN = 28, TURN_OF_LONG_Y = -62, TILT = 16, TURN_STEP = 7; /* [degrees] */
static const double HIDDEN = 4;                                                /* [u] joints nearer than this hide */
enum { TURNS = 12, JOINTS_TO_COMPARE = 400, LEVELS_MOST = 16 };

void sct_space_extents(const sct_result *r, double size[3])
{
    for (int axis = 0; axis < 3; axis++) {
        double low = INFINITY, high = -INFINITY;
        for (int j = 0; j < r->n_joints; j++) {
            low = fmin(low, r->joints[j].at[axis]);
            high = fmax(high, r->joints[j].at[axis]);
        }
        size[axis] = high - low;
    }
}

static int count_hidden(const sct_scene *scene, double width, double height)
{
    const int n = scene->result->n_joints;
    sct_point low = {INFINITY, INFINITY}, high = {-INFINITY, -INFINITY};
    for (int j = 0; j < n; j++) {
        low = (sct_point){fmin(low.x, scene->at[j].x), fmin(low.y, scene->at[j].y)};
        high = (sct_point){fmax(high.x, scene->at[j].x), fmax(high.y, scene->at[j].y)};
    }
    const double scale = fmin(width / fmax(high.x - low.x, 1e-9), height / fmax(high.y - low.y, 1e-9));
    int hidden = 0;
    for (int i = 0; i < n; i++)
        for (int j = 0; j < i; j++)
            hidden += scale * hypot(scene->at[i].x - scene->at[j].x, scene->at[i].y - scene->at[j].y) < HIDDEN;
    return hidden;
}

void sct_space_view(sct_scene *scene, double width, double height)
{
    double size[3];
    sct_space_extents(scene->result, size);
    const double first = size[1] > 2 * size[0] ? TURN_OF_LONG_Y : TURN; /* the long side goes to the right */
    double best = first;
    int fewest = -1;
    scene->tilt = TILT * RADIAN;
    for (int i = 0; i < TURNS && fewest != 0 && scene->result->n_joints <= JOINTS_TO_COMPARE; i++) {
        /* 0, +7, -7, +14, ...: the nearest turn to the usual one that hides least */
        const int steps = (i + 1) / 2;
        const double turn = first + (i % 2 == 1 ? 1 : -1) * steps * TURN_STEP;
        sct_project(scene->result, turn * RADIAN, scene->tilt, scene->at, scene->away);
        const int hidden = count_hidden(scene, width, height);
        if (fewest < 0 || hidden < fewest) {
            fewest = hidden;
            best = turn;
        }
    }
    scene->turn = best * RADIAN;
    sct_project(scene->result, scene->turn, scene->tilt, scene->at, scene->away);
}

/* ---- members -------------------------------------------------------------------------------------------------------
 */

typedef struct depth_order {
    double away;
    int member;
} depth_order;

static int farthest_first(const void *left, const void *right)
{
    const depth_order *p = left, *q = right;
    if (p->away != q->away) return p->away > q->away ? -1 : 1;
    return p->member - q->member;
}

sct_status sct_space_members(sct_scene *scene)
{
    const size_t n = (size_t)scene->result->n_members;
    depth_order *order = sct_arena_array(scene->arena, n, sizeof *order);
    if (order == NULL) return SCT_NO_MEMORY;
    for (size_t m = 0; m < n; m++) order[m] = (depth_order){scene->sticks[m].away, (int)m};
    if (n > 0) qsort(order, n, sizeof *order, farthest_first);
    for (size_t i = 0; i < n; i++) sct_band_member(scene, order[i].member);
    return SCT_OK;
}

/* ---- axes, levels --------------------------------------------------------------------------------------------------
 */

void sct_space_axes(sct_scene *scene)
{
    static const char *const NAMES[3] = {"x", "y", "z"};
    static const double ROOM = 44;
    const double outer = 70, bottom = scene->high.y - 8;
    sct_choice choices[24];
    int n = 0;
    for (int row = 0; row < 6; row++) /* lower left, lower right, then further down, then at the top */
        for (int side = 0; side < 4; side++) {
            const double y = row < 4 ? bottom + 16 * row : scene->low.y + 20 - 40 * (row - 4);
            const double off = side < 2 ? outer : -20;
            const sct_point at = {side % 2 == 0 ? scene->low.x - off : scene->high.x + off, y};
            choices[n] = (sct_choice){sct_box_level(at, ROOM, ROOM), n};
            n++;
        }
    const int label = sct_labels_ask(scene->labels, choices, n);
    sct_labels_settle(scene->labels);
    const int choice = sct_labels_choice(scene->labels, label);
    if (choice < 0) return;
    const sct_point origin = {choices[choice].box.x, choices[choice].box.y + 12};
    for (int axis = 0; axis < 3; axis++) {
        const double unit[3] = {axis == 0, axis == 1, axis == 2};
        const sct_point d = sct_project_direction(scene, unit);
        const sct_point tip = {origin.x + 27 * d.x, origin.y + 27 * d.y};
        const sct_point name = {origin.x + 36 * d.x, origin.y + 36 * d.y + BASELINE * LABEL};
        sct_arrow(&scene->sheet, origin, tip, ROLE_SOFT, HAIR);
        sct_sheet_words(&scene->sheet, name, LABEL, ANCHOR_MIDDLE, ROLE_SOFT, NAMES[axis]);
    }
}

static int find_levels(const sct_scene *scene, int joint_at[LEVELS_MOST])
{
    const sct_result *r = scene->result;
    int n = 0;
    for (int j = 0; j < r->n_joints; j++) {
        int k = 0;
        while (k < n && fabs(r->joints[joint_at[k]].at[2] - r->joints[j].at[2]) > 5e-4) k++;
        if (k == LEVELS_MOST) return 0;
        if (k == n)
            joint_at[n++] = j;
        else if (scene->at[j].x > scene->at[joint_at[k]].x)
            joint_at[k] = j;
    }
    return n;
}

void sct_space_levels(sct_scene *scene)
{
    const sct_result *r = scene->result;
    double size[3];
    int joint_at[LEVELS_MOST];
    sct_space_extents(r, size);
    const int n = size[2] > fmax(size[0], size[1]) ? find_levels(scene, joint_at) : 0;
    sct_point corner, opposite;
    sct_labels_bounds(scene->labels, &corner, &opposite);
    const double x = opposite.x + 8;
    for (int k = 0; k < n; k++) { /* one that would stand on another gives way */
        const double z = r->joints[joint_at[k]].at[2], y = scene->at[joint_at[k]].y;
        const sct_box box = sct_box_level((sct_point){x + 30, y - 6}, 32, 7);
        if (sct_labels_crossed(scene->labels, &box, SCT_SOLID, -1) > 0) continue;
        sct_labels_block(scene->labels, box, SCT_SOLID, -1);
        sct_quantity words;
        char signed_words[SCT_QUANTITY_ROOM + 4];
        sct_quantity_length(words, z, 2, r->us_customary);
        const char *sign = fabs(z) < 0.005 ? "\xC2\xB1" : z > 0 ? "+" : "";
        sct_number_format(signed_words, sizeof signed_words, "%s%s", sign, words);
        const sct_point triangle[3] = {{x + 6, y}, {x + 1, y - 7}, {x + 11, y - 7}};
        sct_sheet_line(&scene->sheet, (sct_point){x, y}, (sct_point){x + 60, y}, ROLE_LINE, HAIR);
        sct_sheet_polygon(&scene->sheet, triangle, 3, ROLE_PAGE, ROLE_SOFT, THIN);
        sct_sheet_words(&scene->sheet, (sct_point){x + 15, y - 3}, LABEL, ANCHOR_START, ROLE_SOFT, signed_words);
    }
}

void sct_space_size(const sct_result *r, char *out, size_t room)
{
    double size[3];
    sct_quantity words[3];
    sct_space_extents(r, size);
    for (int axis = 0; axis < 3; axis++) sct_quantity_length(words[axis], size[axis], 2, r->us_customary);
    sct_number_format(out, room, "%s \xC3\x97 %s \xC3\x97 %s\xE2\x80\xAF%s", words[0], words[1], words[2],
                      sct_length_unit_name(r->us_customary));
}
