#include "report/explain_json_bent.h"

#include "report/bent_checks.h"

static void range(sct_json *w, const char *name, const double ends[2])
{
    sct_json_key(w, name);
    sct_json_vector(w, ends, 2);
}

static void check(sct_json *w, const sct_bent_check *c)
{
    sct_json_entry(w);
    sct_json_begin(w, "{");
    sct_json_string(w, "check", sct_check_text(c->kind));
    sct_json_number(w, "place_m", c->x);
    sct_json_number(w, "force_N", c->N);
    sct_json_both_axes(w, "moment_Nm", c->M);
    sct_json_number(w, "limit_Pa", c->f);
    if (c->kind == SCT_CHECK_BENT_BUCKLING) {
        sct_json_string(w, "axis", c->by.axis == 0 ? "in_plane" : "out_of_plane");
        sct_json_number(w, "critical_stress_Pa", c->by.column.sigma);
    }
    sct_json_number(w, "moments_times", c->amplification);
    sct_json_key(w, "per_N_and_Nm");
    sct_json_vector(w, c->by.c, 3);
    sct_json_number(w, "utilisation", c->utilisation);
    sct_json_boolean(w, "passes", c->utilisation <= 1.0 + SCT_KEPT_TO);
    sct_json_end(w, "}");
}

sct_status sct_explain_json_bent(sct_json *w, const sct_result *r, int combination, int member, bool is_checked)
{
    sct_bent_checks checks;
    const sct_status status = sct_bent_checks_of(r, combination, member, &checks);
    if (status != SCT_OK) return status;
    range(w, "force_along_N", checks.N);
    range(w, "moment_in_plane_along_Nm", checks.M[0]);
    range(w, "moment_out_of_plane_along_Nm", checks.M[1]);
    sct_json_key(w, "checks");
    sct_json_begin(w, "[");
    for (int k = 0; is_checked && k < checks.n; k++) check(w, &checks.check[k]);
    sct_json_end(w, "]");
    return SCT_OK;
}

void sct_explain_json_bows(sct_json *w, const sct_result *r, int member)
{
    sct_json_key(w, "bows");
    sct_json_begin(w, "[");
    for (int i = 0; i < r->n_bows; i++) {
        const sct_bow_result *b = &r->bows[i];
        if (b->member != member) continue;
        sct_json_entry(w);
        sct_json_begin(w, "{");
        sct_json_string(w, "axis", b->axis == 0 ? "in_plane" : "out_of_plane");
        sct_json_string(w, "run", b->run);
        sct_json_string(w, "combination", b->combination >= 0 ? r->combinations[b->combination] : NULL);
        sct_json_number(w, "place_m", b->x);
        sct_json_number(w, "value_m", b->v);
        sct_json_number(w, "limit_m", b->at_most);
        sct_json_number(w, "utilisation", b->utilisation);
        sct_json_boolean(w, "passes", b->utilisation <= 1.0 + SCT_KEPT_TO);
        sct_json_end(w, "}");
    }
    sct_json_end(w, "]");
}
