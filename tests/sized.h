/* Models in JSON, sized; and the derivatives of a sizing problem against differences. */
#ifndef TESTS_SIZED_H
#define TESTS_SIZED_H

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "support.h"

#include "analysis/structure.h"
#include "base/random.h"
#include "sizing/problem.h"

static inline sct_model *parse(const char *text)
{
    sct_issues *issues = sct_issues_new();
    sct_model *model = NULL;
    const sct_status status = sct_model_parse("test.json", text, strlen(text), &model, issues);
    for (int i = 0; i < sct_issues_count(issues); i++) {
        if (sct_issues_get(issues, i)->severity != SCT_ERROR) continue;
        char *line = sct_issue_line(sct_issues_get(issues, i));
        printf("%s\n", line);
        free(line);
    }
    ck_assert_int_eq(status, SCT_OK);
    sct_issues_free(issues);
    return model;
}

static inline sct_model *read_file(const char *path)
{
    sct_issues *issues = sct_issues_new();
    sct_model *model = NULL;
    ck_assert_int_eq(sct_model_read(path, &model, issues), SCT_OK);
    sct_issues_free(issues);
    return model;
}

static inline sct_result *size_with(const sct_model *model, const sct_settings *settings)
{
    sct_issues *issues = sct_issues_new();
    sct_result *result = NULL;
    const sct_status status = sct_size(model, settings, &result, issues);
    for (int i = 0; status != SCT_OK && i < sct_issues_count(issues); i++)
        printf("%s\n", sct_issues_get(issues, i)->message);
    ck_assert_int_eq(status, SCT_OK);
    sct_issues_free(issues);
    return result;
}

/* ---- derivatives ------------------------------------------------------------------------------------------------ */

typedef struct probe {
    sct_structure *st;
    sct_duty *duty;
    sct_problem *problem;
    const sct_nlp *nlp;
} probe;

static inline probe open_probe(const sct_model *model, bool plain)
{
    probe p = {0};
    sct_status status;
    sct_fault why;
    sct_issues *issues = sct_issues_new();
    ck_assert_int_eq(sct_structure_build(model, &p.st, issues), SCT_OK);
    p.duty = sct_duty_new(p.st, SCT_ENGINE_AUTO, &status);
    ck_assert_int_eq(status, SCT_OK);
    bool *compressed = calloc((size_t)p.st->n_bars, sizeof *compressed);
    ck_assert_int_eq(sct_problem_new(p.duty, compressed, NULL, NULL, plain, &p.problem, why), SCT_OK);
    free(compressed);
    sct_issues_free(issues);
    p.nlp = sct_problem_nlp(p.problem);
    return p;
}

static inline void close_probe(probe *p)
{
    sct_problem_free(p->problem);
    sct_duty_free(p->duty);
    sct_structure_free(p->st);
}

/* Gradients alone of every constraint that acts. */
static inline void check_gradients(const sct_model *model, unsigned seed)
{
    probe p = open_probe(model, false);
    const size_t n = (size_t)p.nlp->n, m = (size_t)p.nlp->m;
    sct_random random = {seed};
    double *x = calloc(n, sizeof *x), *y = calloc(n, sizeof *y), *df = calloc(n, sizeof *df), f;
    double *g = calloc(m, sizeof *g), *up = calloc(m, sizeof *up), *down = calloc(m, sizeof *down);
    double *dg = calloc(m * n, sizeof *dg);
    int *rows = calloc(m, sizeof *rows);
    for (size_t v = 0; v < n; v++)
        x[v] = p.nlp->lower[v] + (0.3 + 0.4 * sct_random_unit(&random)) * (p.nlp->upper[v] - p.nlp->lower[v]);
    for (size_t j = 0; j < m; j++) rows[j] = (int)j;
    ck_assert_int_eq(p.nlp->value(p.nlp->user, x, &f, g), SCT_OK);
    ck_assert_int_eq(p.nlp->gradient(p.nlp->user, x, (int)m, rows, df, dg), SCT_OK);
    for (size_t v = 0; v < n; v++) {
        const double h = 1e-5;
        memcpy(y, x, n * sizeof *y);
        y[v] = x[v] + h;
        ck_assert_int_eq(p.nlp->value(p.nlp->user, y, &f, up), SCT_OK);
        y[v] = x[v] - h;
        ck_assert_int_eq(p.nlp->value(p.nlp->user, y, &f, down), SCT_OK);
        for (size_t j = 0; j < m; j++) {
            if (g[j] < -6.0) continue;
            const double slope = (up[j] - down[j]) / (2 * h);
            if (!(fabs(dg[j * n + v] - slope) <= 1e-6 * (1 + fabs(slope))))
                ck_abort_msg("row %zu of %zu (%g): %.9g, by differences %.9g", j, m, g[j], dg[j * n + v], slope);
        }
    }
    free(x);
    free(y);
    free(df);
    free(g);
    free(up);
    free(down);
    free(dg);
    free(rows);
    close_probe(&p);
}

/* Gradients of f and of every active constraint against central differences, and the curvature of a random mixture
 * against differences of gradients. */
static inline void check_derivatives(const sct_model *model, bool plain, unsigned seed, double tol)
{
    probe p = open_probe(model, plain);
    const int n = p.nlp->n, m = p.nlp->m;
    const size_t un = (size_t)n, um = (size_t)m;
    sct_random random = {seed};
    double *x = calloc(un, sizeof *x), *y = calloc(un, sizeof *y), *df = calloc(un, sizeof *df);
    double *g = calloc(um, sizeof *g), *up = calloc(um, sizeof *up), *down = calloc(um, sizeof *down);
    double *dg = calloc(um * un, sizeof *dg), *dg_up = calloc(um * un, sizeof *dg_up),
           *dg_down = calloc(um * un, sizeof *dg_down);
    double *H = calloc(un * un, sizeof *H), *mu = calloc(um, sizeof *mu);
    int *rows = calloc(um, sizeof *rows);
    double f, f_up, f_down;
    for (int v = 0; v < n; v++)
        x[v] = p.nlp->lower[v] + (0.3 + 0.4 * sct_random_unit(&random)) * (p.nlp->upper[v] - p.nlp->lower[v]);
    for (int j = 0; j < m; j++) {
        rows[j] = j;
        mu[j] = sct_random_unit(&random);
    }
    ck_assert_int_eq(p.nlp->value(p.nlp->user, x, &f, g), SCT_OK);
    ck_assert_int_eq(p.nlp->gradient(p.nlp->user, x, m, rows, df, dg), SCT_OK);
    for (int j = 0; j < m; j++)
        if (g[j] < -6.0) mu[j] = 0.0; /* near the cut-off for constraints that are left alone */
    if (!plain) ck_assert_int_eq(p.nlp->curvature(p.nlp->user, x, m, rows, mu, H), SCT_OK);
    for (int v = 0; v < n; v++) {
        const double h = 1e-5 * (plain ? x[v] : 1.0);
        memcpy(y, x, un * sizeof *y);
        y[v] = x[v] + h;
        ck_assert_int_eq(p.nlp->value(p.nlp->user, y, &f_up, up), SCT_OK);
        ck_assert_int_eq(p.nlp->gradient(p.nlp->user, y, m, rows, df, dg_up), SCT_OK);
        y[v] = x[v] - h;
        ck_assert_int_eq(p.nlp->value(p.nlp->user, y, &f_down, down), SCT_OK);
        ck_assert_int_eq(p.nlp->gradient(p.nlp->user, y, m, rows, df, dg_down), SCT_OK);
        for (int j = 0; j < m; j++) {
            if (g[j] < -6.0) continue;
            const double slope = (up[j] - down[j]) / (2 * h), scale = plain ? 1 / x[v] : 1.0;
            ck_assert_double_eq_tol(dg[(size_t)j * un + (size_t)v], slope, 1e-7 * scale * (1 + fabs(g[j]) * 10));
        }
        for (int w = 0; !plain && w < n; w++) {
            double change = 0.0;
            for (int j = 0; j < m; j++)
                change += mu[j] * (dg_up[(size_t)j * un + (size_t)w] - dg_down[(size_t)j * un + (size_t)w]) / (2 * h);
            ck_assert_double_eq_tol(H[(size_t)v * un + (size_t)w], change, tol * (1 + fabs(change)));
        }
    }
    free(x);
    free(y);
    free(df);
    free(g);
    free(up);
    free(down);
    free(dg);
    free(dg_up);
    free(dg_down);
    free(H);
    free(mu);
    free(rows);
    close_probe(&p);
}
#endif
