/* Fuzzing analysis and sizing: the bytes are drawn on for a small truss or frame, grown joint by joint so that it
 * mostly stands. The result of a truss balances at every joint, holds no NAN, and is kept only when every limit, worked
 * out here anew, is kept; that of a frame agrees with the second analysis. */
#include "fuzz.h"

#include <float.h>
#include <math.h>
#include <string.h>

#include "base/text.h"
#include "model/model.h"

typedef struct bytes {
    const unsigned char *at, *end;
} bytes;

static int draw(bytes *b, int below)
{
    return b->at < b->end ? *b->at++ % below : 0;
}

/* A number over some powers of ten, now and then far out. */
static double draw_size(bytes *b, double from)
{
    static const double FAR[] = {1e-4, 1e-2, 1e2, 1e4};
    const int kind = draw(b, 64);
    return from * (1.0 + draw(b, 256) / 16.0) * (kind < 4 ? FAR[kind] : 1.0);
}

/* ---- a model in words -----------------------------------------------------------------------------------------------
 */

enum { MOST_JOINTS = 9, MOST_GROUPS = 3 };

static void write_joints(bytes *b, int dimensions, int n_joints, sct_text *out)
{
    sct_text_add(out, "\"joints\": {");
    for (int j = 0; j < n_joints; j++) {
        sct_text_format(out, "%s\"J%d\": {\"at\": [%.3f, %.3f", j > 0 ? ", " : "", j,
                        (j / 2) * 2.0 + draw(b, 256) / 256.0, (j % 2) * 2.0 + draw(b, 256) / 256.0);
        if (dimensions == 3) sct_text_format(out, ", %.3f", (j % 3) + draw(b, 256) / 128.0);
        sct_text_add(out, "]");
        const int support = j < dimensions ? 1 : draw(b, 12);
        if (support == 1)
            sct_text_add(out,
                         dimensions == 2 ? ", \"support\": [\"x\", \"y\"]" : ", \"support\": [\"x\", \"y\", \"z\"]");
        if (support == 2) sct_text_add(out, ", \"support\": [\"y\"]");
        if (support == 3)
            sct_text_add(out, dimensions == 2 ? ", \"support\": [[0.6, 0.8]]" : ", \"support\": [[0.6, 0, 0.8]]");
        sct_text_add(out, "}");
    }
    sct_text_add(out, "},\n");
}

/* How the ends of a member of a frame hang on its joints. */
static void write_ends(bytes *b, sct_text *out)
{
    static const char *const ENDS[] = {"", ", \"ends\": \"fixed\"", ", \"ends\": [\"fixed\", \"pinned\"]",
                                       ", \"ends\": [{\"in_plane\": \"3e5 N m/rad\"}, \"fixed\"]"};
    sct_text_add(out, ENDS[draw(b, 4)]);
}

static int write_members(bytes *b, int dimensions, int n_joints, int n_groups, bool is_frame, sct_text *out)
{
    int n = 0;
    sct_text_add(out, "\"members\": {");
    for (int j = 1; j < n_joints; j++) {
        const int back = j < dimensions ? j : dimensions + draw(b, 8) / 7;
        for (int k = 0; k < back; k++) {
            const int jump = draw(b, 8) == 7 ? 1 : 0, to = j - 1 - k - jump;
            if (to < 0) continue;
            sct_text_format(out, "%s\"M%d\": {\"from\": \"J%d\", \"to\": \"J%d\", \"group\": \"G%d\"",
                            n > 0 ? ", " : "", n, j, to, n < n_groups ? n : draw(b, n_groups));
            if (draw(b, 8) == 7)
                sct_text_format(out, ", \"length_factor\": {\"in_plane\": %.2f}", 0.5 + draw(b, 16) / 8.0);
            if (is_frame) write_ends(b, out);
            sct_text_add(out, "}");
            n++;
        }
    }
    sct_text_add(out, "},\n");
    return n;
}

static void write_groups(bytes *b, int n_groups, bool is_held, bool is_frame, sct_text *out)
{
    static const char RELATIONS[] = "\"second_moment\": {\"c\": 2}, \"section_modulus\": {\"c\": 0.8}, "
                                    "\"torsion_constant\": {\"c\": 1}";
    sct_text_add(out, "\"groups\": {");
    for (int g = 0; g < n_groups; g++) {
        sct_text_format(out, "%s\"G%d\": {\"material\": \"S\", ", g > 0 ? ", " : "", g);
        const int kind = draw(b, 8);
        if (is_frame && !is_held && kind < 7)
            sct_text_format(out, "\"area\": {\"at_least\": %.9g, \"at_most\": 0.05}, %s}", 1e-4 * (1 + draw(b, 20)),
                            RELATIONS);
        else if (is_frame && is_held)
            sct_text_format(out, "\"area\": %.9g, %s}", draw_size(b, 1e-3), RELATIONS);
        else if (is_held || kind == 0)
            sct_text_format(out, "\"area\": %.9g, \"second_moment\": {\"c\": 1}}", draw_size(b, 1e-4));
        else if (kind < 7) /* sections take a hundred times as long */
            sct_text_format(out, "\"area\": {\"at_least\": %.9g, \"at_most\": 0.02}, \"second_moment\": {\"c\": %d}}",
                            1e-5 * (1 + draw(b, 50)), 1 + draw(b, 4));
        else
            sct_text_format(out, "\"family\": \"%s\"}", draw(b, 2) ? "CHS" : "HEA");
    }
    sct_text_add(out, "},\n");
}

static void write_cases(bytes *b, int dimensions, int n_joints, int n_members, bool is_frame, sct_text *out)
{
    const bool has_weight = draw(b, 2) == 1;
    sct_text_format(out, "\"cases\": {\"a\": {\"action\": \"permanent\"%s, \"joints\": {",
                    has_weight ? ", \"self_weight\": true" : "");
    for (int k = 0; k < 2; k++) {
        const int joint =
            dimensions + (n_joints > dimensions ? draw(b, n_joints - dimensions) : 0) - (n_joints == dimensions);
        if (k == 1 && joint == n_joints - 1) continue;
        sct_text_format(out, "%s\"J%d\": [%.9g, %.9g%s]", k > 0 ? ", " : "", k == 0 ? n_joints - 1 : joint,
                        draw_size(b, 1e3) * (draw(b, 3) - 1), -draw_size(b, 2e3), dimensions == 3 ? ", -500" : "");
    }
    sct_text_add(out, "}");
    if (is_frame && draw(b, 2) == 1)
        sct_text_format(out, ", \"loads\": [{\"on\": \"M%d\", \"line\": [%d, -%d%s]}]", draw(b, n_members),
                        draw(b, 400) - 200, draw(b, 2000), dimensions == 3 ? ", 50" : "");
    sct_text_add(out, "}, \"b\": {\"action\": \"other\"");
    const int kind = draw(b, 4);
    if (kind == 1)
        sct_text_format(out, ", \"members\": {\"M%d\": {\"temperature\": \"%d K\"}}", draw(b, n_members),
                        draw(b, 80) - 40);
    if (kind == 2)
        sct_text_format(out, ", \"settlements\": {\"J0\": [%s0, -0.0%02d]}", dimensions == 3 ? "0, " : "",
                        draw(b, 100));
    if (kind != 1 && kind != 2)
        sct_text_format(out, ", \"joints\": {\"J%d\": [%d, 100%s]}", n_joints - 1, draw(b, 200) - 100,
                        dimensions == 3 ? ", 0" : "");
    sct_text_add(out, "}},\n\"combinations\": {\"both\": {\"for\": \"allowable\", \"sum\": {\"a\": 1, \"b\": 1}}, "
                      "\"first\": {\"for\": \"allowable\", \"sum\": {\"a\": 1.5}}, "
                      "\"use\": {\"for\": \"service\", \"sum\": {\"a\": 1}}},\n");
}

static char *write_model(bytes *b, bool is_held, bool is_frame)
{
    static const char *const BUCKLING[] = {"none", "Euler", "Euler and Johnson"};
    sct_text out = {0};
    const int dimensions = 2 + (draw(b, 4) == 3), n_joints = dimensions + 1 + draw(b, MOST_JOINTS - 3);
    const int n_groups = 1 + draw(b, MOST_GROUPS);
    sct_text_format(
        &out,
        "{\"scantling\": 1, \"dimensions\": %d, \"units\": {\"length\": \"m\", \"force\": \"N\", \"stress\": \"Pa\"},\n"
        "\"materials\": {\"S\": {\"E\": %.9g, \"density\": \"7850 kg/m3\", \"yield\": 2.35e8, \"G\": 8.1e10, "
        "\"expansion\": \"1.2e-5 "
        "1/K\", "
        "\"allowable\": {\"tension\": 1.4e8, \"compression\": 1.2e8}}},\n",
        dimensions, draw(b, 8) == 7 ? draw_size(b, 1e10) : 2.1e11);
    write_joints(b, dimensions, n_joints, &out);
    const int n_members = write_members(b, dimensions, n_joints, n_groups, is_frame, &out);
    write_groups(b, n_groups, is_held, is_frame, &out);
    write_cases(b, dimensions, n_joints, n_members, is_frame, &out);
    const int kind = draw(b, 3);
    sct_text_format(&out, "\"limits\": {\"buckling\": {\"by\": \"%s\"%s}", BUCKLING[kind],
                    kind > 0 ? ", \"safety\": 1.92" : "");
    if (draw(b, 2)) sct_text_format(&out, ", \"slenderness\": {\"any\": %d, \"compression\": 200}", 250 + draw(b, 200));
    if (draw(b, 2))
        sct_text_format(&out,
                        ", \"deflection\": [{\"joints\": [\"J%d\"], \"direction\": \"y\", \"at_most\": 0.0%02d1}]",
                        n_joints - 1, draw(b, 100));
    sct_text_add(&out, "}}\n");
    char *text = sct_text_take(&out, NULL);
    MUST(text != NULL);
    return text;
}

/* ---- what holds of a result
 * ------------------------------------------------------------------------------------------ */

static double largest_force(const sct_result *r)
{
    double largest = 0.0;
    for (int k = 0; k < r->n_combinations * r->n_members; k++) largest = fmax(largest, fabs(r->N[k]));
    for (int k = 0; k < r->n_combinations * r->n_joints * 3; k++) {
        largest = fmax(largest, fabs(r->load[k]));
        largest = fmax(largest, fabs(r->reaction[k]));
    }
    return largest;
}

/* Joints balance under member forces, loads and reactions. */
static void check_balance(const sct_result *r)
{
    const double tolerance = (1e-7 + 100.0 * r->accuracy.error) * largest_force(r);
    for (int c = 0; c < r->n_combinations; c++) {
        double sum[MOST_JOINTS][3] = {{0}};
        for (int e = 0; e < r->n_members; e++) {
            const sct_member_result *m = &r->members[e];
            for (int i = 0; i < 3; i++) {
                const double pull =
                    r->N[c * r->n_members + e] * (r->joints[m->to].at[i] - r->joints[m->from].at[i]) / m->L;
                sum[m->from][i] += pull;
                sum[m->to][i] -= pull;
            }
        }
        for (int j = 0; j < r->n_joints; j++)
            for (int i = 0; i < 3; i++) {
                const int k = (c * r->n_joints + j) * 3 + i;
                MUST(fabs(sum[j][i] + r->load[k] + r->reaction[k]) <= tolerance);
            }
    }
}

static void check_numbers(const sct_result *r)
{
    MUST(r->mass > 0.0 && isfinite(r->mass) && r->utilisation >= 0.0 && isfinite(r->utilisation));
    double mass = 0.0;
    for (int e = 0; e < r->n_members; e++) {
        const sct_member_result *m = &r->members[e];
        const sct_group_result *g = &r->groups[m->group];
        MUST(g->A > 0.0 && isfinite(g->A) && isfinite(m->N) && isfinite(m->utilisation));
        mass += r->model->materials[r->model->groups[m->group].material].density * g->A * m->L;
    }
    MUST(fabs(mass - r->mass) <= 1e-9 * r->mass);
    for (int k = 0; k < r->n_combinations * r->n_members; k++) MUST(isfinite(r->N[k]));
    for (int k = 0; k < r->n_combinations * r->n_joints * 3; k++) MUST(isfinite(r->u[k]) && isfinite(r->reaction[k]));
}

/* Euler's stress, or Johnson's below half the yield strength. [Pa] */
static double critical_stress(double E, double fy, double lambda, sct_buckling by)
{
    const double pi = 3.14159265358979323846, euler = pi * pi * E / (lambda * lambda);
    if (by == SCT_BUCKLING_EULER || euler <= 0.5 * fy) return euler;
    return fy * (1.0 - fy * lambda * lambda / (4.0 * pi * pi * E));
}

static double member_utilisation(const sct_result *r, int c, int e)
{
    const sct_member *member = &r->model->members[e];
    const sct_group *group = &r->model->groups[member->group];
    const sct_material *material = &r->model->materials[group->material];
    const sct_group_result *size = &r->groups[member->group];
    const double N = r->N[c * r->n_members + e], sigma = fabs(N) / size->A;
    double worst = N > 0.0 ? sigma / group->allowable[0] : sigma / group->allowable[1];
    for (int axis = 0; axis < 2; axis++) {
        const double Lcr = r->members[e].L * (member->source[axis] == SCT_LENGTH_FACTOR ? member->length[axis] : 1.0);
        const double lambda = Lcr / sqrt(size->I[axis] / size->A);
        if (N < 0.0 && group->buckling != SCT_BUCKLING_NONE)
            worst = fmax(worst, sigma * group->safety /
                                    critical_stress(material->E, material->yield, lambda, group->buckling));
        worst = fmax(worst, lambda / group->slenderness_any);
    }
    return worst;
}

/* Every limit, from forces, displacements and sizes. */
static void check_limits(const sct_result *r)
{
    static const double TOL = 3e-6; /* the search ends within 1e-6 of a limit */
    double worst = 0.0;
    for (int c = 0; c < r->n_combinations; c++)
        for (int e = 0; e < r->n_members && r->model->combinations[c].basis != SCT_SERVICE; e++)
            worst = fmax(worst, member_utilisation(r, c, e));
    for (int d = 0; d < r->model->n_deflections; d++) {
        const sct_deflection_limit *limit = &r->model->deflections[d];
        for (int c = 0; c < r->n_combinations; c++)
            for (int k = 0; limit->in[c] && k < limit->n_joints; k++) {
                const double *u = &r->u[(c * r->n_joints + limit->joints[k]) * 3], *n = limit->direction;
                worst = fmax(worst, fabs(u[0] * n[0] + u[1] * n[1] + u[2] * n[2]) / limit->at_most);
            }
    }
    MUST(!r->kept || worst <= 1.0 + TOL);
    MUST(worst <= r->utilisation * (1.0 + TOL) + TOL);
}

static void check_texts(const sct_result *r, bool all)
{
    for (int format = SCT_SUMMARY; format <= SCT_DRAWING_SVG; format++) {
        char *text = NULL;
        size_t size = 0;
        if (!all && format != SCT_SUMMARY) return;
        MUST(sct_write(r, (sct_format)format, NULL, &text, &size) == SCT_OK && size > 0 && strlen(text) == size);
        MUST(strstr(text, "Preliminary sizing only") != NULL || format == SCT_MODEL_JSON);
        MUST(!r->kept || format == SCT_DRAWING_SVG || strstr(text, "nan") == NULL);
        free(text);
    }
}

int LLVMFuzzerTestOneInput(const unsigned char *data, size_t size)
{
    bytes b = {data, data + size};
    const bool is_held = draw(&b, 2) == 1, writes = draw(&b, 32) == 31, is_frame = draw(&b, 3) == 2;
    char *text = write_model(&b, is_held, is_frame);
    sct_settings settings = sct_settings_defaults();
    settings.starts = 1;
    settings.iterations = 15;
    settings.engine = draw(&b, 2) ? SCT_ENGINE_SMALL : SCT_ENGINE_SPARSE;
    sct_issues *issues = sct_issues_new();
    sct_model *model = NULL;
    sct_result *result = NULL;
    MUST(issues != NULL);
    sct_status status = sct_model_parse("fuzz", text, strlen(text), &model, issues);
    if (getenv("SCT_FUZZ_SHOW") != NULL) fputs(text, stdout);
    if (status == SCT_OK)
        status = is_held ? sct_check(model, &settings, &result, issues) : sct_size(model, &settings, &result, issues);
    MUST(status == SCT_OK || status == SCT_BAD_INPUT || status == SCT_MECHANISM || status == SCT_NOT_ACCURATE);
    MUST((status == SCT_OK) == (result != NULL) && (status == SCT_OK) == (sct_issues_errors(issues) == 0));
    if (result != NULL) {
        check_numbers(result);
        if (!result->has_bent) {
            check_balance(result);
            check_limits(result);
        } else if (is_held) { /* the model is its own sized model */
            MUST(sct_verify(model, result, issues) == SCT_OK);
        }
        check_texts(result, writes);
    }
    if (getenv("SCT_FUZZ_SHOW") != NULL) {
        for (int i = 0; i < sct_issues_count(issues); i++) printf("%s\n", sct_issues_get(issues, i)->message);
        printf("%s\n", result != NULL ? result->verdict : sct_status_text(status));
    }
    sct_result_free(result);
    sct_model_free(model);
    sct_issues_free(issues);
    free(text);
    return 0;
}
