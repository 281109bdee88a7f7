/* Double-layer space grids as model files: square on square, offset by half a bay, 8 nx ny members. */
#ifndef TESTS_GRID_H
#define TESTS_GRID_H

#include <math.h>
#include <stdlib.h>

#include "base/text.h"

/* 10 x 10 bays in 4 zones: 800 members, 42 groups; 25 x 25 in 6: 5000 members, 93 groups. */
typedef struct grid_spec {
    int nx, ny;
    int zones; /* per half side: groups are symmetric about both middle lines and the diagonal; 0: every member is
                * a group of its own */
    bool deep; /* deflection limits at every joint of the top layer, else at nine */
} grid_spec;

enum { GRID_TOP, GRID_BOTTOM, GRID_WEB };

/* Zone 0 .. zones-1 of a place t in 0 .. 1 along a side, the same on both sides of the middle. */
static inline int grid_zone(double t, int zones)
{
    const int z = (int)(2.0 * fmin(t, 1.0 - t) * zones);
    return z < zones ? z : zones - 1;
}

/* Number of a group: chords along x at (a, b) and along y at (b, a) are alike; webs at (a, b) and (b, a). */
static inline int grid_group(const grid_spec *s, int kind, bool along_y, double x, double y)
{
    const int zones = s->zones;
    int a = grid_zone(x / s->nx, zones), b = grid_zone(y / s->ny, zones);
    if (along_y || (kind == GRID_WEB && a < b)) {
        const int t = a;
        a = b;
        b = t;
    }
    if (kind == GRID_WEB) return 2 * zones * zones + a * (a + 1) / 2 + b;
    return kind * zones * zones + a * zones + b;
}

typedef struct grid_writer {
    const grid_spec *spec;
    sct_text *text;
    int n_members;
} grid_writer;

static inline void grid_member(grid_writer *w, const char *from, const char *to, int kind, bool along_y, double x,
                               double y)
{
    const int group = w->spec->zones > 0 ? grid_group(w->spec, kind, along_y, x, y) : w->n_members;
    sct_text_format(w->text, "%s\n    \"M%d\": {\"from\": \"%s\", \"to\": \"%s\", \"group\": \"G%d\"}",
                    w->n_members > 0 ? "," : "", w->n_members, from, to, group);
    w->n_members++;
}

typedef struct grid_name {
    char text[28];
} grid_name;

static inline grid_name grid_joint(char layer, int i, int j)
{
    grid_name name;
    snprintf(name.text, sizeof name.text, "%c%d.%d", layer, i, j);
    return name;
}

static inline void grid_members(grid_writer *w)
{
    const int nx = w->spec->nx, ny = w->spec->ny;
    for (int j = 0; j <= ny; j++)
        for (int i = 0; i <= nx; i++) {
            const grid_name T = grid_joint('T', i, j);
            if (i < nx) grid_member(w, T.text, grid_joint('T', i + 1, j).text, GRID_TOP, false, i + 0.5, j);
            if (j < ny) grid_member(w, T.text, grid_joint('T', i, j + 1).text, GRID_TOP, true, i, j + 0.5);
        }
    for (int j = 0; j < ny; j++)
        for (int i = 0; i < nx; i++) {
            const grid_name B = grid_joint('B', i, j);
            if (i + 1 < nx) grid_member(w, B.text, grid_joint('B', i + 1, j).text, GRID_BOTTOM, false, i + 1, j + 0.5);
            if (j + 1 < ny) grid_member(w, B.text, grid_joint('B', i, j + 1).text, GRID_BOTTOM, true, i + 0.5, j + 1);
            for (int c = 0; c < 4; c++) {
                const int di = c & 1, dj = c >> 1;
                grid_member(w, grid_joint('T', i + di, j + dj).text, B.text, GRID_WEB, false, i + 0.25 + 0.5 * di,
                            j + 0.25 + 0.5 * dj);
            }
        }
}

/* Supports: the top layer's edge joints vertically, every fourth bay; three of them along the plan as well. */
static inline bool grid_is_held(const grid_spec *s, int i, int j)
{
    if (i == 0 || i == s->nx) return j % 4 == 0 || j == s->ny;
    if (j == 0 || j == s->ny) return i % 4 == 0 || i == s->nx;
    return false;
}

static inline void grid_joints(const grid_spec *s, sct_text *text)
{
    const double bay = 3.0, depth = 2.1;
    for (int j = 0; j <= s->ny; j++)
        for (int i = 0; i <= s->nx; i++) {
            sct_text_format(text, "%s\n    \"%s\": {\"at\": [%g, %g, %g]", i + j > 0 ? "," : "",
                            grid_joint('T', i, j).text, bay * i, bay * j, depth);
            if (grid_is_held(s, i, j)) {
                const bool is_origin = i == 0 && j == 0, on_x = i == s->nx && j == 0;
                sct_text_add(text, is_origin ? ", \"support\": [\"x\", \"y\", \"z\"]"
                                   : on_x    ? ", \"support\": [\"y\", \"z\"]"
                                             : ", \"support\": [\"z\"]");
            }
            sct_text_add(text, "}");
        }
    for (int j = 0; j < s->ny; j++)
        for (int i = 0; i < s->nx; i++)
            sct_text_format(text, ",\n    \"%s\": {\"at\": [%g, %g, 0]}", grid_joint('B', i, j).text, bay * (i + 0.5),
                            bay * (j + 0.5));
}

/* kN on each joint of the top layer in the four cases: everywhere, on one half, on a quarter, wind uplift. */
static inline double grid_load(const grid_spec *s, int k, int i, int j)
{
    const double edge = (i == 0 || i == s->nx ? 0.5 : 1.0) * (j == 0 || j == s->ny ? 0.5 : 1.0);
    if (k == 0) return -9.0 * edge;
    if (k == 1) return 2 * i <= s->nx ? -13.0 * edge : -2.0 * edge;
    if (k == 2) return 2 * i >= s->nx && 2 * j >= s->ny ? -16.0 * edge : -3.0 * edge;
    return 5.0 * edge * (1.0 + (double)j / s->ny);
}

static inline void grid_cases(const grid_spec *s, sct_text *text)
{
    for (int k = 0; k < 4; k++) {
        sct_text_format(text, "%s\n    \"C%d\": {%s\"joints\": {", k > 0 ? "," : "", k,
                        k == 0 ? "\"self_weight\": true, " : "");
        for (int j = 0; j <= s->ny; j++)
            for (int i = 0; i <= s->nx; i++)
                sct_text_format(text, "%s\"%s\": [0, 0, %g]", i + j > 0 ? ", " : "", grid_joint('T', i, j).text,
                                grid_load(s, k, i, j));
        sct_text_add(text, "}}");
    }
    sct_text_add(text, "\n  },\n  \"combinations\": {");
    for (int k = 0; k < 4; k++)
        sct_text_format(text, "%s\n    \"K%d\": {\"for\": \"allowable\", \"sum\": {\"C%d\": 1}}", k > 0 ? "," : "", k,
                        k);
}

static inline void grid_deflections(const grid_spec *s, sct_text *text)
{
    bool is_first = true;
    for (int j = 0; j <= s->ny; j++)
        for (int i = 0; i <= s->nx; i++) {
            const bool at = s->deep ? !grid_is_held(s, i, j)
                                    : (i * 4 % s->nx < 4 && j * 4 % s->ny < 4 && i > 0 && j > 0 && i * 4 / s->nx < 4 &&
                                       j * 4 / s->ny < 4);
            if (!at) continue;
            sct_text_format(text, "%s\"%s\"", is_first ? "" : ", ", grid_joint('T', i, j).text);
            is_first = false;
        }
}

/** The model file of a grid: free areas, self-weight, stress limits, and deflections at most span / 300. */
static inline void grid_json(const grid_spec *s, sct_text *text)
{
    const int n_groups = s->zones > 0 ? 2 * s->zones * s->zones + s->zones * (s->zones + 1) / 2 : 8 * s->nx * s->ny;
    grid_writer w = {.spec = s, .text = text};
    sct_text_format(text, "{\n  \"scantling\": 1,\n  \"title\": \"space grid, %d members\",\n  \"dimensions\": 3,\n",
                    8 * s->nx * s->ny);
    sct_text_add(
        text,
        "  \"units\": {\"length\": \"m\", \"force\": \"kN\", \"stress\": \"MPa\", \"area\": \"mm2\", \"density\": "
        "\"kg/m3\"},\n  \"materials\": {\"steel\": {\"E\": 210000, \"density\": 7850, \"allowable\": "
        "{\"tension\": 160, \"compression\": 110}}},\n  \"joints\": {");
    grid_joints(s, text);
    sct_text_add(text, "\n  },\n  \"groups\": {");
    for (int g = 0; g < n_groups; g++)
        sct_text_format(text,
                        "%s\n    \"G%d\": {\"material\": \"steel\", \"area\": {\"at_least\": 100, \"at_most\": 40000}}",
                        g > 0 ? "," : "", g);
    sct_text_add(text, "\n  },\n  \"members\": {");
    grid_members(&w);
    sct_text_add(text, "\n  },\n  \"cases\": {");
    grid_cases(s, text);
    sct_text_add(text, "\n  },\n  \"limits\": {\"buckling\": {\"by\": \"none\"}, \"deflection\": [{\"joints\": [");
    grid_deflections(s, text);
    sct_text_format(text, "], \"direction\": \"z\", \"at_most\": \"L/300\", \"span\": %g}]}\n}\n",
                    3.0 * (s->nx < s->ny ? s->nx : s->ny));
}
#endif
