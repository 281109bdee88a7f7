/* The whole result as JSON: one line for each thing in a list. */
#include "json.h"

#include <string.h>

#include "report/shown.h"

/* A writer that knows whether a comma is due. Lists and the outermost object take a line per entry, inner ones none. */
typedef struct writer {
    sct_text *out;
    int depth;
    bool is_first;
} writer;

enum { LINES_DOWN_TO = 2 }; /* entries at this depth still have their own line */

static void entry(writer *w)
{
    if (!w->is_first) sct_text_add(w->out, ",");
    if (w->depth <= LINES_DOWN_TO)
        sct_text_format(w->out, "\n%*s", 2 * w->depth, "");
    else if (!w->is_first)
        sct_text_add(w->out, " ");
    w->is_first = false;
}

static void key(writer *w, const char *name)
{
    entry(w);
    sct_text_json(w->out, name);
    sct_text_add(w->out, ": ");
}

static void begin(writer *w, const char *bracket)
{
    sct_text_add(w->out, bracket);
    w->depth++;
    w->is_first = true;
}

static void end(writer *w, const char *bracket)
{
    const bool is_empty = w->is_first;
    w->depth--;
    if (w->depth < LINES_DOWN_TO && !is_empty) sct_text_format(w->out, "\n%*s", 2 * w->depth, "");
    sct_text_add(w->out, bracket);
    w->is_first = false;
}

static void string(writer *w, const char *name, const char *value)
{
    key(w, name);
    if (value != NULL)
        sct_text_json(w->out, value);
    else
        sct_text_add(w->out, "null");
}

/* Words from a buffer of fixed room, which may have cut a character: all of it but that. */
static void words(writer *w, const char *name, const char *value)
{
    char cut[512] = "";
    const size_t length = sct_whole_characters(value);
    memcpy(cut, value, length < sizeof cut ? length : sizeof cut - 1);
    string(w, name, cut);
}

static void number(writer *w, const char *name, double value)
{
    key(w, name);
    sct_text_number(w->out, value);
}

static void whole(writer *w, const char *name, int value)
{
    key(w, name);
    sct_text_format(w->out, "%d", value);
}

static void boolean(writer *w, const char *name, bool value)
{
    key(w, name);
    sct_text_add(w->out, value ? "true" : "false");
}

static void vector(writer *w, const double v[], int n)
{
    sct_text_add(w->out, "[");
    for (int i = 0; i < n; i++) {
        if (i > 0) sct_text_add(w->out, ", ");
        sct_text_number(w->out, v[i]);
    }
    sct_text_add(w->out, "]");
}

static void both_axes(writer *w, const char *name, const double v[2])
{
    key(w, name);
    begin(w, "{");
    number(w, "in_plane", v[0]);
    number(w, "out_of_plane", v[1]);
    end(w, "}");
}

static const char *combination_name(const sct_result *r, int combination)
{
    return combination >= 0 ? r->combinations[combination] : NULL;
}

/* The vectors of one joint from a table n_combinations x n_joints x 3. */
static void vectors_by_combination(writer *w, const char *name, const sct_result *r, const double *table, int joint)
{
    key(w, name);
    begin(w, "[");
    for (int c = 0; c < r->n_combinations; c++) {
        entry(w);
        vector(w, &table[((size_t)c * (size_t)r->n_joints + (size_t)joint) * 3], r->dimensions);
    }
    end(w, "]");
}

static void add_evidence(writer *w, const sct_result *r)
{
    number(w, "mass_kg", r->mass);
    number(w, "mass_continuous_kg", r->mass_continuous);
    number(w, "utilisation", r->utilisation);
    number(w, "kkt", r->kkt);
    number(w, "violation", r->violation);
    whole(w, "analyses", r->analyses);
    key(w, "accuracy");
    begin(w, "{");
    number(w, "equilibrium", r->accuracy.equilibrium);
    number(w, "error", r->accuracy.error);
    end(w, "}");
}

static void add_starts(writer *w, const sct_result *r)
{
    key(w, "starts");
    begin(w, "[");
    for (int i = 0; i < r->n_starts; i++) {
        const sct_start_result *start = &r->starts[i];
        entry(w);
        begin(w, "{");
        string(w, "outcome", sct_outcome_text(start->outcome));
        boolean(w, "is_best", i == r->best_start);
        number(w, "mass_kg", start->mass);
        number(w, "kkt", start->kkt);
        number(w, "violation", start->violation);
        whole(w, "iterations", start->iterations);
        whole(w, "analyses", start->analyses);
        end(w, "}");
    }
    end(w, "]");
}

static void add_combinations(writer *w, const sct_result *r)
{
    key(w, "combinations");
    begin(w, "[");
    for (int c = 0; c < r->n_combinations; c++) {
        entry(w);
        sct_text_json(w->out, r->combinations[c]);
    }
    end(w, "]");
}

static void add_groups(writer *w, const sct_result *r)
{
    key(w, "groups");
    begin(w, "[");
    for (int g = 0; g < r->n_groups; g++) {
        const sct_group_result *group = &r->groups[g];
        entry(w);
        begin(w, "{");
        string(w, "name", group->name);
        string(w, "material", group->material);
        string(w, "section", group->section);
        boolean(w, "is_held", group->is_held);
        whole(w, "members", group->n_members);
        number(w, "area_m2", group->A);
        both_axes(w, "second_moment_m4", group->I);
        number(w, "length_m", group->length);
        number(w, "unit_mass_kg_per_m", group->unit_mass);
        number(w, "mass_kg", group->mass);
        number(w, "area_continuous_m2", group->A_continuous);
        string(w, "worst_member", group->worst_member >= 0 ? r->members[group->worst_member].name : NULL);
        end(w, "}");
    }
    end(w, "]");
}

static void add_member_forces(writer *w, const sct_result *r, int m)
{
    key(w, "forces_N");
    begin(w, "[");
    for (int c = 0; c < r->n_combinations; c++) {
        entry(w);
        sct_text_number(w->out, r->N[(size_t)c * (size_t)r->n_members + (size_t)m]);
    }
    end(w, "]");
}

static void add_members(writer *w, const sct_result *r)
{
    key(w, "members");
    begin(w, "[");
    for (int m = 0; m < r->n_members; m++) {
        const sct_member_result *member = &r->members[m];
        entry(w);
        begin(w, "{");
        string(w, "name", member->name);
        string(w, "group", r->groups[member->group].name);
        string(w, "from", r->joints[member->from].name);
        string(w, "to", r->joints[member->to].name);
        number(w, "length_m", member->L);
        both_axes(w, "effective_length_m", member->Lcr);
        both_axes(w, "slenderness", member->lambda);
        number(w, "mass_kg", member->mass);
        number(w, "utilisation", member->utilisation);
        string(w, "check", sct_check_text(member->check));
        string(w, "combination", combination_name(r, member->combination));
        number(w, "force_N", member->N);
        boolean(w, "is_compressed", member->compressed);
        number(w, "largest_force_N", member->N_max);
        string(w, "largest_force_in", combination_name(r, member->N_max_in));
        number(w, "smallest_force_N", member->N_min);
        string(w, "smallest_force_in", combination_name(r, member->N_min_in));
        add_member_forces(w, r, m);
        end(w, "}");
    }
    end(w, "]");
}

static void add_joints(writer *w, const sct_result *r)
{
    key(w, "joints");
    begin(w, "[");
    for (int j = 0; j < r->n_joints; j++) {
        entry(w);
        begin(w, "{");
        string(w, "name", r->joints[j].name);
        key(w, "at_m");
        vector(w, r->joints[j].at, r->dimensions);
        vectors_by_combination(w, "displacements_m", r, r->u, j);
        vectors_by_combination(w, "loads_N", r, r->load, j);
        end(w, "}");
    }
    end(w, "]");
}

static void add_reactions(writer *w, const sct_result *r)
{
    key(w, "reactions");
    begin(w, "[");
    for (int j = 0; j < r->n_joints; j++) {
        const sct_joint_result *joint = &r->joints[j];
        if (joint->n_held == 0) continue;
        entry(w);
        begin(w, "{");
        string(w, "joint", joint->name);
        key(w, "held");
        begin(w, "[");
        for (int i = 0; i < joint->n_held; i++) {
            entry(w);
            vector(w, joint->held[i], r->dimensions);
        }
        end(w, "]");
        vectors_by_combination(w, "forces_N", r, r->reaction, j);
        end(w, "}");
    }
    end(w, "]");
}

static void add_deflections(writer *w, const sct_result *r)
{
    key(w, "deflections");
    begin(w, "[");
    for (int i = 0; i < r->n_deflections; i++) {
        const sct_deflection_result *d = &r->deflections[i];
        entry(w);
        begin(w, "{");
        whole(w, "limit", d->limit);
        string(w, "joint", r->joints[d->joint].name);
        string(w, "combination", combination_name(r, d->combination));
        key(w, "direction");
        vector(w, d->direction, r->dimensions);
        number(w, "displacement_m", d->u);
        number(w, "at_most_m", d->at_most);
        string(w, "at_most_as_written", d->label);
        number(w, "utilisation", d->utilisation);
        end(w, "}");
    }
    end(w, "]");
}

static void add_prices(writer *w, const sct_result *r)
{
    key(w, "prices");
    begin(w, "[");
    for (int i = 0; i < r->n_prices; i++) {
        const sct_price *price = &r->prices[i];
        entry(w);
        begin(w, "{");
        string(w, "check", sct_check_text(price->kind));
        string(w, "group", price->group >= 0 ? r->groups[price->group].name : NULL);
        key(w, "limit");
        if (price->limit >= 0)
            sct_text_format(w->out, "%d", price->limit);
        else
            sct_text_add(w->out, "null");
        number(w, "multiplier_kg", price->multiplier);
        number(w, "kg_per_SI_unit", price->per_unit);
        words(w, "words", price->words);
        end(w, "}");
    }
    end(w, "]");
}

sct_status sct_result_json(const sct_result *result, sct_text *out)
{
    writer w = {out, 0, true};
    begin(&w, "{");
    string(&w, "caution", SCT_CAUTION);
    string(&w, "format", "scantling result");
    whole(&w, "version", SCT_RESULT_FORMAT);
    string(&w, "program", SCT_VERSION);
    string(&w, "title", result->title);
    string(&w, "outcome", sct_outcome_text(result->outcome));
    boolean(&w, "kept", result->kept);
    words(&w, "verdict", result->verdict);
    whole(&w, "dimensions", result->dimensions);
    add_evidence(&w, result);
    add_starts(&w, result);
    add_prices(&w, result);
    add_combinations(&w, result);
    add_groups(&w, result);
    add_members(&w, result);
    add_deflections(&w, result);
    add_reactions(&w, result);
    add_joints(&w, result);
    end(&w, "}");
    sct_text_add(out, "\n");
    return out->failed ? SCT_NO_MEMORY : SCT_OK;
}
