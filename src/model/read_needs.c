/* What members that bend and twist need: properties of their sections, a shear modulus, joints that they can turn. */
#include <math.h>

#include "reader.h"

/* What the members of one group do; each with one of them as an example, -1: none does. */
typedef struct deeds {
    int bends, twists;
} deeds;

static bool turns(const sct_member *member, int end, int rotation)
{
    return member->end[end].fixity[rotation] != SCT_PINNED;
}

static bool bends(const sct_member *member)
{
    bool any = false;
    for (int end = 0; end < 2; end++) any |= turns(member, end, SCT_IN_PLANE) || turns(member, end, SCT_OUT_OF_PLANE);
    return any;
}

static void collect_deeds(const sct_model *m, deeds of_group[])
{
    for (int g = 0; g < m->n_groups; g++) of_group[g] = (deeds){-1, -1};
    for (int i = 0; i < m->n_members; i++) {
        const sct_member *member = &m->members[i];
        deeds *d = &of_group[member->group];
        if (d->bends < 0 && bends(member)) d->bends = i;
        if (d->twists < 0 && turns(member, 0, SCT_TWIST) && turns(member, 1, SCT_TWIST)) d->twists = i;
    }
    for (int c = 0; c < m->n_cases; c++)
        for (int i = 0; i < m->cases[c].n_member_loads; i++) {
            const int member = m->cases[c].member_loads[i].member;
            deeds *d = &of_group[m->members[member].group];
            if (d->bends < 0) d->bends = member;
        }
}

/* A group with an area: what it must say beside it. */
static void check_area(sct_reader *r, const sct_group *g, deeds d)
{
    const sct_model *m = r->model;
    if (d.bends >= 0 && isnan(g->I[0].c))
        sct_fields_error_at(
            &r->f, g->where,
            "no \"second_moment\"; member \"%s\" bends: expected {\"c\": ...} for I = c A^2, or a \"shape\"",
            sct_show(m->members[d.bends].name).text);
    if (d.bends >= 0 && isnan(g->W[0].c))
        sct_fields_error_at(&r->f, g->where,
                            "no \"section_modulus\"; member \"%s\" bends: expected {\"c\": ...} for W = c A^1.5, or a "
                            "\"shape\"",
                            sct_show(m->members[d.bends].name).text);
    if (d.twists >= 0 && isnan(g->J.c))
        sct_fields_error_at(&r->f, g->where,
                            "no \"torsion_constant\"; member \"%s\" is held against twisting at both ends: expected "
                            "{\"c\": ...} for J = c A^2, a \"shape\", or an end with \"torsion\": \"pinned\"",
                            sct_show(m->members[d.twists].name).text);
}

/* A group with sections of a family: what each of them must have. */
static void check_section(sct_reader *r, const sct_group *g, const sct_section *section, deeds d, bool *told)
{
    const sct_model *m = r->model;
    const bool lacks_W = d.bends >= 0 && isnan(section->W[0]), lacks_J = d.twists >= 0 && isnan(section->J);
    if (*told || (!lacks_W && !lacks_J)) return;
    *told = true;
    sct_fields_error_at(
        &r->f, g->where, "section \"%s\" has no \"%s\"; member \"%s\" %s: expected it in family \"%s\"",
        sct_show(section->name).text, lacks_W ? "W" : "J", sct_show(m->members[lacks_W ? d.bends : d.twists].name).text,
        lacks_W ? "bends" : "is held against twisting at both ends", sct_show(m->families[g->family].name).text);
}

static void check_group(sct_reader *r, const sct_group *g, deeds d)
{
    const sct_model *m = r->model;
    bool told = false;
    if (g->kind == SCT_FREE_AREA || g->kind == SCT_HELD_AREA) check_area(r, g, d);
    for (int i = 0; g->kind == SCT_LADDER && i < g->n_ladder; i++)
        check_section(r, g, &m->families[g->family].sections[g->ladder[i]], d, &told);
    if (g->kind == SCT_HELD_SECTION) check_section(r, g, &m->families[g->family].sections[g->held], d, &told);
    if (d.twists >= 0 && isnan(m->materials[g->material].G))
        sct_fields_error_at(&r->f, m->materials[g->material].where,
                            "no \"G\"; member \"%s\" is held against twisting at both ends: expected a shear modulus "
                            "such as \"81 GPa\", or an end with \"torsion\": \"pinned\"",
                            sct_show(m->members[d.twists].name).text);
}

/* Rotations that are held, sprung or loaded where no member turns with the joint. */
static void check_joints(sct_reader *r, bool is_turned[])
{
    const sct_model *m = r->model;
    for (int i = 0; i < m->n_members; i++)
        for (int k = 0; k < 2 * SCT_TURNS; k++)
            if (turns(&m->members[i], k / SCT_TURNS, k % SCT_TURNS))
                is_turned[k / SCT_TURNS == 0 ? m->members[i].from : m->members[i].to] = true;
    for (int j = 0; j < m->n_joints; j++) {
        const sct_joint *joint = &m->joints[j];
        bool has_spring = false;
        for (int i = 0; i < joint->n_springs; i++) has_spring |= joint->springs[i].is_turn;
        if (!is_turned[j] && (joint->n_turns_held > 0 || has_spring))
            sct_issue_add(r->f.issues, SCT_WARNING, joint->where,
                          "the rotation is held or sprung, but every member is pinned here: it holds nothing; a member "
                          "that shall feel it needs \"ends\"");
        is_turned[j] |= joint->n_turns_held > 0 || has_spring;
    }
    for (int c = 0; c < m->n_cases; c++)
        for (int i = 0; i < m->cases[c].n_loads; i++) {
            const sct_joint_load *load = &m->cases[c].loads[i];
            const bool is_loaded = fabs(load->M[0]) > 0 || fabs(load->M[1]) > 0 || fabs(load->M[2]) > 0;
            if (is_loaded && !is_turned[load->joint])
                sct_fields_error_at(&r->f, load->where,
                                    "nothing carries this moment: every member is pinned at joint \"%s\"; expected one "
                                    "with \"ends\": \"fixed\"",
                                    sct_show(m->joints[load->joint].name).text);
        }
}

void sct_check_needs(sct_reader *r)
{
    const sct_model *m = r->model;
    deeds *of_group = sct_fields_array(&r->f, m->n_groups, sizeof *of_group);
    bool *is_turned = sct_fields_array(&r->f, m->n_joints, sizeof *is_turned);
    if (r->f.failure != SCT_OK) return;
    collect_deeds(m, of_group);
    for (int g = 0; g < m->n_groups; g++) check_group(r, &m->groups[g], of_group[g]);
    check_joints(r, is_turned);
}
