/* The whole result as JSON: one line for each thing in a list. */
#include "json.h"

#include "report/json_bent.h"
#include "report/json_text.h"
#include "report/supports.h"
#include "report/whole.h"

static const char *combination_name(const sct_result *r, int combination)
{
    return combination >= 0 ? r->combinations[combination] : NULL;
}

/* The vectors of one joint from a table n_combinations x n_joints x 3, of which `n` components count. */
static void components_by_combination(sct_json *w, const char *name, const sct_result *r, const double *table,
                                      int joint, int n)
{
    sct_json_key(w, name);
    sct_json_begin(w, "[");
    for (int c = 0; c < r->n_combinations; c++) {
        sct_json_entry(w);
        sct_json_vector(w, &table[((size_t)c * (size_t)r->n_joints + (size_t)joint) * 3], n);
    }
    sct_json_end(w, "]");
}

static void vectors_by_combination(sct_json *w, const char *name, const sct_result *r, const double *table, int joint)
{
    components_by_combination(w, name, r, table, joint, r->dimensions);
}

/* About all three axes, in a plane model too: it turns about z. */
static void moments_by_combination(sct_json *w, const char *name, const sct_result *r, const double *table, int joint)
{
    if (r->has_bent) components_by_combination(w, name, r, table, joint, 3);
}

static void add_evidence(sct_json *w, const sct_result *r)
{
    sct_json_number(w, "mass_kg", r->mass);
    sct_json_number(w, "mass_continuous_kg", r->mass_continuous);
    sct_json_number(w, "utilisation", r->utilisation);
    sct_json_number(w, "utilisation_at_most", r->utilisation_at_most);
    sct_json_number(w, "kkt", r->kkt);
    sct_json_number(w, "violation", r->violation);
    sct_json_whole(w, "analyses", r->analyses);
    sct_json_key(w, "accuracy");
    sct_json_begin(w, "{");
    sct_json_number(w, "equilibrium", r->accuracy.equilibrium);
    sct_json_number(w, "error", r->accuracy.error);
    sct_json_number(w, "bound", r->accuracy.bound);
    sct_json_end(w, "}");
}

static void add_starts(sct_json *w, const sct_result *r)
{
    sct_json_key(w, "starts");
    sct_json_begin(w, "[");
    for (int i = 0; i < r->n_starts; i++) {
        const sct_start_result *start = &r->starts[i];
        sct_json_entry(w);
        sct_json_begin(w, "{");
        sct_json_string(w, "outcome", sct_outcome_text(start->outcome));
        sct_json_boolean(w, "is_best", i == r->best_start);
        sct_json_number(w, "mass_kg", start->mass);
        sct_json_number(w, "kkt", start->kkt);
        sct_json_number(w, "violation", start->violation);
        sct_json_whole(w, "iterations", start->iterations);
        sct_json_whole(w, "analyses", start->analyses);
        sct_json_end(w, "}");
    }
    sct_json_end(w, "]");
}

static void add_combinations(sct_json *w, const sct_result *r)
{
    sct_json_key(w, "combinations");
    sct_json_begin(w, "[");
    for (int c = 0; c < r->n_combinations; c++) {
        sct_json_entry(w);
        sct_text_json(w->out, r->combinations[c]);
    }
    sct_json_end(w, "]");
    sct_json_key(w, "combinations_are_for");
    sct_json_begin(w, "[");
    for (int c = 0; c < r->n_combinations; c++) {
        sct_json_entry(w);
        sct_text_json(w->out, r->is_for_strength[c] ? "allowable" : "service");
    }
    sct_json_end(w, "]");
}

/* For each combination the names of its slack members. */
static void add_slack(sct_json *w, const sct_result *r)
{
    sct_json_key(w, "slack");
    sct_json_begin(w, "[");
    for (int c = 0; c < r->n_combinations; c++) {
        sct_json_entry(w);
        sct_json_begin(w, "[");
        for (int m = 0; m < r->n_members; m++) {
            if (!r->slack[(size_t)c * (size_t)r->n_members + (size_t)m]) continue;
            sct_json_entry(w);
            sct_text_json(w->out, r->members[m].name);
        }
        sct_json_end(w, "]");
    }
    sct_json_end(w, "]");
}

static void add_warnings(sct_json *w, const sct_result *r)
{
    sct_json_key(w, "warnings");
    sct_json_begin(w, "[");
    for (int i = 0; i < r->n_warnings; i++) {
        sct_json_entry(w);
        sct_text_json(w->out, r->warnings[i]);
    }
    sct_json_end(w, "]");
}

static void add_settings(sct_json *w, const sct_result *r)
{
    sct_json_key(w, "settings");
    sct_json_begin(w, "{");
    sct_json_whole(w, "starts", r->settings.starts);
    sct_json_whole(w, "seed", (int)r->settings.seed);
    sct_json_whole(w, "iterations", r->settings.iterations);
    sct_json_number(w, "tolerance", r->settings.tolerance);
    sct_json_boolean(w, "plain", r->settings.plain);
    sct_json_end(w, "}");
}

static void add_groups(sct_json *w, const sct_result *r)
{
    sct_json_key(w, "groups");
    sct_json_begin(w, "[");
    for (int g = 0; g < r->n_groups; g++) {
        const sct_group_result *group = &r->groups[g];
        sct_json_entry(w);
        sct_json_begin(w, "{");
        sct_json_string(w, "name", group->name);
        sct_json_string(w, "material", group->material);
        sct_json_string(w, "section", group->section);
        sct_json_boolean(w, "is_held", group->is_held);
        sct_json_whole(w, "members", group->n_members);
        sct_json_number(w, "area_m2", group->A);
        sct_json_both_axes(w, "second_moment_m4", group->I);
        if (r->has_bent) {
            sct_json_both_axes(w, "section_modulus_m3", group->W);
            sct_json_number(w, "torsion_constant_m4", group->J);
        }
        sct_json_number(w, "length_m", group->length);
        sct_json_number(w, "unit_mass_kg_per_m", group->unit_mass);
        sct_json_number(w, "mass_kg", group->mass);
        sct_json_number(w, "area_continuous_m2", group->A_continuous);
        sct_json_string(w, "worst_member", group->worst_member >= 0 ? r->members[group->worst_member].name : NULL);
        sct_json_end(w, "}");
    }
    sct_json_end(w, "]");
}

static void add_member_forces(sct_json *w, const sct_result *r, int m)
{
    sct_json_key(w, "forces_N");
    sct_json_begin(w, "[");
    for (int c = 0; c < r->n_combinations; c++) {
        sct_json_entry(w);
        sct_text_number(w->out, r->N[(size_t)c * (size_t)r->n_members + (size_t)m]);
    }
    sct_json_end(w, "]");
}

static void add_members(sct_json *w, const sct_result *r)
{
    sct_json_key(w, "members");
    sct_json_begin(w, "[");
    for (int m = 0; m < r->n_members; m++) {
        const sct_member_result *member = &r->members[m];
        sct_json_entry(w);
        sct_json_begin(w, "{");
        sct_json_string(w, "name", member->name);
        sct_json_string(w, "group", r->groups[member->group].name);
        sct_json_string(w, "from", r->joints[member->from].name);
        sct_json_string(w, "to", r->joints[member->to].name);
        sct_json_number(w, "length_m", member->L);
        sct_json_both_axes(w, "effective_length_m", member->Lcr);
        sct_json_both_axes(w, "slenderness", member->lambda);
        sct_json_number(w, "mass_kg", member->mass);
        sct_json_number(w, "utilisation", member->utilisation);
        sct_json_string(w, "check", sct_check_text(member->check));
        sct_json_string(w, "combination", combination_name(r, member->combination));
        sct_json_number(w, "force_N", member->N);
        sct_json_boolean(w, "is_compressed", member->compressed);
        sct_json_number(w, "largest_force_N", member->N_max);
        sct_json_string(w, "largest_force_in", combination_name(r, member->N_max_in));
        sct_json_number(w, "smallest_force_N", member->N_min);
        sct_json_string(w, "smallest_force_in", combination_name(r, member->N_min_in));
        add_member_forces(w, r, m);
        if (r->has_bent) sct_json_bent_member(w, r, m);
        sct_json_end(w, "}");
    }
    sct_json_end(w, "]");
}

static void add_joints(sct_json *w, const sct_result *r)
{
    sct_json_key(w, "joints");
    sct_json_begin(w, "[");
    for (int j = 0; j < r->n_joints; j++) {
        sct_json_entry(w);
        sct_json_begin(w, "{");
        sct_json_string(w, "name", r->joints[j].name);
        sct_json_key(w, "at_m");
        sct_json_vector(w, r->joints[j].at, r->dimensions);
        vectors_by_combination(w, "displacements_m", r, r->u, j);
        vectors_by_combination(w, "loads_N", r, r->load, j);
        moments_by_combination(w, "rotations_rad", r, r->turn, j);
        moments_by_combination(w, "moment_loads_Nm", r, r->moment_load, j);
        sct_json_end(w, "}");
    }
    sct_json_end(w, "]");
}

static void add_reactions(sct_json *w, const sct_result *r)
{
    sct_json_key(w, "reactions");
    sct_json_begin(w, "[");
    for (int j = 0; j < r->n_joints; j++) {
        const sct_joint_result *joint = &r->joints[j];
        if (!sct_support_gives_any(r, j)) continue;
        sct_json_entry(w);
        sct_json_begin(w, "{");
        sct_json_string(w, "joint", joint->name);
        sct_json_key(w, "held");
        sct_json_begin(w, "[");
        for (int i = 0; i < joint->n_held; i++) {
            sct_json_entry(w);
            sct_json_vector(w, joint->held[i], r->dimensions);
        }
        sct_json_end(w, "]");
        vectors_by_combination(w, "forces_N", r, r->reaction, j);
        moments_by_combination(w, "moments_Nm", r, r->moment, j);
        sct_json_end(w, "}");
    }
    sct_json_end(w, "]");
}

static void add_deflections(sct_json *w, const sct_result *r)
{
    sct_json_key(w, "deflections");
    sct_json_begin(w, "[");
    for (int i = 0; i < r->n_deflections; i++) {
        const sct_deflection_result *d = &r->deflections[i];
        sct_json_entry(w);
        sct_json_begin(w, "{");
        sct_json_whole(w, "limit", d->limit);
        sct_json_string(w, "joint", r->joints[d->joint].name);
        if (d->from >= 0) sct_json_string(w, "relative_to", r->joints[d->from].name);
        sct_json_string(w, "combination", combination_name(r, d->combination));
        sct_json_key(w, "direction");
        sct_json_vector(w, d->direction, r->dimensions);
        sct_json_number(w, "displacement_m", d->u);
        sct_json_number(w, "at_most_m", d->at_most);
        sct_json_string(w, "at_most_as_written", d->label);
        sct_json_number(w, "utilisation", d->utilisation);
        sct_json_end(w, "}");
    }
    sct_json_end(w, "]");
}

static void add_prices(sct_json *w, const sct_result *r)
{
    sct_json_key(w, "prices");
    sct_json_begin(w, "[");
    for (int i = 0; i < r->n_prices; i++) {
        const sct_price *price = &r->prices[i];
        sct_json_entry(w);
        sct_json_begin(w, "{");
        sct_json_string(w, "check", sct_check_text(price->kind));
        sct_json_string(w, "group", price->group >= 0 ? r->groups[price->group].name : NULL);
        sct_json_key(w, "limit");
        if (price->limit >= 0)
            sct_text_format(w->out, "%d", price->limit);
        else
            sct_text_add(w->out, "null");
        sct_json_number(w, "multiplier_kg", price->multiplier);
        sct_json_number(w, "kg_per_SI_unit", price->per_unit);
        sct_json_number(w, "saving_kg", price->saving);
        sct_json_words(w, "words", price->words);
        sct_json_end(w, "}");
    }
    sct_json_end(w, "]");
}

sct_status sct_result_json(const sct_result *result, sct_text *out)
{
    sct_json w = {out, 0, true};
    sct_json_begin(&w, "{");
    sct_json_string(&w, "caution", SCT_CAUTION);
    sct_json_string(&w, "format", "scantling result");
    sct_json_whole(&w, "version", SCT_RESULT_FORMAT);
    sct_json_string(&w, "program", SCT_VERSION);
    sct_json_string(&w, "title", result->title);
    sct_json_string(&w, "outcome", sct_outcome_text(result->outcome));
    sct_json_boolean(&w, "kept", result->kept);
    sct_json_words(&w, "verdict", result->verdict);
    add_warnings(&w, result);
    sct_json_whole(&w, "dimensions", result->dimensions);
    add_settings(&w, result);
    add_evidence(&w, result);
    add_starts(&w, result);
    add_prices(&w, result);
    add_combinations(&w, result);
    if (result->slack != NULL) add_slack(&w, result);
    add_groups(&w, result);
    add_members(&w, result);
    add_deflections(&w, result);
    if (result->has_bent) sct_json_bows(&w, result);
    sct_json_whole_structure(&w, result);
    add_reactions(&w, result);
    add_joints(&w, result);
    sct_json_end(&w, "}");
    sct_text_add(out, "\n");
    return out->failed ? SCT_NO_MEMORY : SCT_OK;
}
