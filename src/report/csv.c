/* The member schedule as CSV: one table of columns, used for the head and for every kind of record. */
#include "csv.h"

#include <math.h>
#include <string.h>

#include "base/arena.h"
#include "base/names.h"
#include "report/csv_bent.h"
#include "report/shown.h"

/* What a record is about: a member, or a total over groups. */
typedef struct record {
    const sct_result *r;
    const char *kind;
    const sct_member_result *member; /* NULL for totals */
    const sct_group_result *group;   /* of the member, or one of the groups summed; NULL: of all */
    int count;
    double length, mass;
} record;

void sct_csv_text(sct_text *out, const char *raw)
{
    const char c = raw[strspn(raw, " ")];
    const bool is_guarded = raw[0] == '\'' || (c != '\0' && strchr("=+-@\t\r\n", c) != NULL);
    const size_t length = strlen(raw);
    const bool is_quoted =
        length > 0 && (strpbrk(raw, ",;\"\r\n\t") != NULL || raw[0] == ' ' || raw[length - 1] == ' ');
    if (is_quoted) sct_text_add(out, "\"");
    if (is_guarded) sct_text_add(out, "'");
    for (const char *p = raw; *p != '\0'; p++) {
        if (*p == '"') sct_text_add(out, "\"");
        sct_text_bytes(out, p, 1);
    }
    if (is_quoted) sct_text_add(out, "\"");
}

static void add_shown(sct_text *out, const record *rec, double value, sct_display quantity)
{
    sct_text_shown(out, value, quantity, rec->r->us_customary);
}

static void add_combination(sct_text *out, const record *rec, int combination)
{
    if (combination >= 0) sct_csv_text(out, rec->r->combinations[combination]);
}

/* One function per column; `unit` is SCT_SHOWN_COUNT where the column has none. Columns that make sense for single
 * members only are empty in totals. */
typedef void write_field(sct_text *out, const record *rec);

static void field_record(sct_text *out, const record *rec)
{
    sct_csv_text(out, rec->kind);
}
static void field_mark(sct_text *out, const record *rec)
{
    if (rec->member != NULL) sct_csv_text(out, rec->member->name);
}
static void field_group(sct_text *out, const record *rec)
{
    if (rec->member != NULL) sct_csv_text(out, rec->group->name);
}
static void field_from(sct_text *out, const record *rec)
{
    if (rec->member != NULL) sct_csv_text(out, rec->r->joints[rec->member->from].name);
}
static void field_to(sct_text *out, const record *rec)
{
    if (rec->member != NULL) sct_csv_text(out, rec->r->joints[rec->member->to].name);
}
static bool is_total_of_material(const record *rec)
{
    return strcmp(rec->kind, "material") == 0;
}
static void field_section(sct_text *out, const record *rec)
{
    if (rec->group != NULL && rec->group->section != NULL && !is_total_of_material(rec))
        sct_csv_text(out, rec->group->section);
}
static void field_area(sct_text *out, const record *rec)
{
    if (rec->group != NULL && !is_total_of_material(rec)) add_shown(out, rec, rec->group->A, SCT_SHOWN_AREA);
}
static void field_material(sct_text *out, const record *rec)
{
    if (rec->group != NULL) sct_csv_text(out, rec->group->material);
}
static void field_length(sct_text *out, const record *rec)
{
    add_shown(out, rec, rec->length, SCT_SHOWN_LENGTH);
}
static void field_count(sct_text *out, const record *rec)
{
    sct_text_format(out, "%d", rec->count);
}
static void field_unit_mass(sct_text *out, const record *rec)
{
    if (rec->group != NULL && !is_total_of_material(rec))
        add_shown(out, rec, rec->group->unit_mass, SCT_SHOWN_UNIT_MASS);
}
static void field_mass(sct_text *out, const record *rec)
{
    add_shown(out, rec, rec->mass, SCT_SHOWN_MASS);
}
static void field_combination(sct_text *out, const record *rec)
{
    if (rec->member != NULL) add_combination(out, rec, rec->member->combination);
}
static void field_check(sct_text *out, const record *rec)
{
    if (rec->member != NULL) sct_csv_text(out, sct_check_text(rec->member->check));
}
static void field_force(sct_text *out, const record *rec)
{
    if (rec->member != NULL) add_shown(out, rec, rec->member->N, SCT_SHOWN_FORCE);
}
static void field_tension(sct_text *out, const record *rec)
{
    if (rec->member != NULL && rec->member->N_max >= 0) add_shown(out, rec, rec->member->N_max, SCT_SHOWN_FORCE);
}
static void field_tension_in(sct_text *out, const record *rec)
{
    if (rec->member != NULL && rec->member->N_max >= 0) add_combination(out, rec, rec->member->N_max_in);
}
static void field_compression(sct_text *out, const record *rec)
{
    if (rec->member != NULL && rec->member->N_min <= 0) add_shown(out, rec, rec->member->N_min, SCT_SHOWN_FORCE);
}
static void field_compression_in(sct_text *out, const record *rec)
{
    if (rec->member != NULL && rec->member->N_min <= 0) add_combination(out, rec, rec->member->N_min_in);
}
static void field_Lcr_in(sct_text *out, const record *rec)
{
    if (rec->member != NULL) add_shown(out, rec, rec->member->Lcr[0], SCT_SHOWN_LENGTH);
}
static void field_Lcr_out(sct_text *out, const record *rec)
{
    if (rec->member != NULL) add_shown(out, rec, rec->member->Lcr[1], SCT_SHOWN_LENGTH);
}
static void field_slenderness(sct_text *out, const record *rec)
{
    if (rec->member != NULL) sct_text_slenderness(out, fmax(rec->member->lambda[0], rec->member->lambda[1]));
}
static void field_utilisation(sct_text *out, const record *rec)
{
    if (rec->member != NULL) sct_text_utilisation(out, rec->member->utilisation);
}

static const struct {
    const char *head;
    sct_display unit;
    write_field *write;
} COLUMNS[] = {
    {"record", SCT_SHOWN_COUNT, field_record},
    {"mark", SCT_SHOWN_COUNT, field_mark},
    {"group", SCT_SHOWN_COUNT, field_group},
    {"from", SCT_SHOWN_COUNT, field_from},
    {"to", SCT_SHOWN_COUNT, field_to},
    {"section", SCT_SHOWN_COUNT, field_section},
    {"area", SCT_SHOWN_AREA, field_area},
    {"material", SCT_SHOWN_COUNT, field_material},
    {"length", SCT_SHOWN_LENGTH, field_length},
    {"count", SCT_SHOWN_COUNT, field_count},
    {"unit mass", SCT_SHOWN_UNIT_MASS, field_unit_mass},
    {"total mass", SCT_SHOWN_MASS, field_mass},
    {"governing combination", SCT_SHOWN_COUNT, field_combination},
    {"governing check", SCT_SHOWN_COUNT, field_check},
    {"force", SCT_SHOWN_FORCE, field_force},
    {"max tension", SCT_SHOWN_FORCE, field_tension},
    {"max tension in", SCT_SHOWN_COUNT, field_tension_in},
    {"max compression", SCT_SHOWN_FORCE, field_compression},
    {"max compression in", SCT_SHOWN_COUNT, field_compression_in},
    {"Lcr in plane", SCT_SHOWN_LENGTH, field_Lcr_in},
    {"Lcr out of plane", SCT_SHOWN_LENGTH, field_Lcr_out},
    {"slenderness", SCT_SHOWN_COUNT, field_slenderness},
    {"utilisation", SCT_SHOWN_COUNT, field_utilisation},
};
enum { N_COLUMNS = (int)(sizeof COLUMNS / sizeof COLUMNS[0]) };

static void add_head(sct_text *out, const sct_result *r)
{
    for (int i = 0; i < N_COLUMNS; i++) {
        if (i > 0) sct_text_add(out, ",");
        sct_text_add(out, COLUMNS[i].head);
        if (COLUMNS[i].unit != SCT_SHOWN_COUNT)
            sct_text_format(out, " [%s]", sct_shown_unit(COLUMNS[i].unit, r->us_customary));
    }
    sct_csv_bent_head(out, r);
    sct_text_add(out, "\r\n");
}

static void add_record(sct_text *out, const record *rec)
{
    for (int i = 0; i < N_COLUMNS; i++) {
        if (i > 0) sct_text_add(out, ",");
        COLUMNS[i].write(out, rec);
    }
    sct_csv_bent_member(out, rec->r, rec->member);
    sct_text_add(out, "\r\n");
}

static void add_members(sct_text *out, const sct_result *r)
{
    for (int m = 0; m < r->n_members; m++) {
        const sct_member_result *member = &r->members[m];
        add_record(out, &(record){.r = r,
                                  .kind = "member",
                                  .member = member,
                                  .group = &r->groups[member->group],
                                  .count = 1,
                                  .length = member->L,
                                  .mass = member->mass});
    }
}

/* Two records for each member and combination: in the first columns which member, in the last ones the numbers. */
static void add_ends(sct_text *out, const sct_result *r)
{
    for (int m = 0; m < r->n_members; m++)
        for (int end = 0; end < 2 * r->n_combinations; end++) {
            sct_text_add(out, "end,");
            sct_csv_text(out, r->members[m].name);
            sct_text_add(out, ",");
            sct_csv_text(out, r->groups[r->members[m].group].name);
            for (int i = 3; i < N_COLUMNS; i++) sct_text_add(out, ",");
            sct_csv_bent_end(out, r, end / 2, m, end % 2);
            sct_text_add(out, "\r\n");
        }
}

/* What a total is over, as one string: the material, or the section with its material. NULL: a free area, which is
 * joined with nothing else, or out of memory. */
static const char *total_key(const sct_group_result *group, bool by_material, sct_arena *arena)
{
    if (by_material) return group->material;
    if (group->section == NULL) return NULL;
    const size_t s = strlen(group->section), m = strlen(group->material);
    char *key = sct_arena_array(arena, s + m + 2, 1);
    if (key == NULL) return NULL;
    memcpy(key, group->section, s);
    memcpy(key + s + 1, group->material, m);
    key[s] = '\n'; /* keeps "A" + "B C" from "A B" + "C" */
    return key;
}

static bool sum_totals(const sct_result *r, bool by_material, sct_arena *arena, sct_names *names, record totals[],
                       int *n)
{
    *n = 0;
    for (int g = 0; g < r->n_groups; g++) {
        const sct_group_result *group = &r->groups[g];
        const char *key = total_key(group, by_material, arena);
        if (key == NULL && (by_material || group->section != NULL)) return false;
        int at = key != NULL ? sct_names_find(names, key) : -1;
        if (at < 0) {
            at = (*n)++;
            totals[at] = (record){.r = r, .kind = by_material ? "material" : "section", .group = group};
            if (key != NULL && !sct_names_put(names, key, at)) return false;
        }
        totals[at].count += group->n_members;
        totals[at].length += group->length;
        totals[at].mass += group->mass;
    }
    return true;
}

/* One record for each section or material, in the order of its first group. False when out of memory. */
static bool add_totals(sct_text *out, const sct_result *r, bool by_material)
{
    int n = 0;
    sct_arena *arena = sct_arena_new();
    sct_names *names = sct_names_new(r->n_groups);
    record *totals = arena != NULL ? sct_arena_array(arena, (size_t)r->n_groups, sizeof *totals) : NULL;
    const bool done = names != NULL && totals != NULL && sum_totals(r, by_material, arena, names, totals, &n);
    for (int i = 0; done && i < n; i++) {
        if (totals[i].count > 0) add_record(out, &totals[i]);
    }
    sct_names_free(names);
    sct_arena_free(arena);
    return done;
}

static void add_grand_total(sct_text *out, const sct_result *r)
{
    record rec = {.r = r, .kind = "total", .count = r->n_members, .mass = r->mass};
    for (int g = 0; g < r->n_groups; g++) rec.length += r->groups[g].length;
    add_record(out, &rec);
}

/* A record of words: they stand in the second column. */
static void add_words(sct_text *out, const sct_result *r, const char *kind, const char *words)
{
    sct_text_add(out, kind);
    sct_text_add(out, ",");
    sct_csv_text(out, words);
    for (int i = 2; i < N_COLUMNS; i++) sct_text_add(out, ",");
    sct_csv_bent_member(out, r, NULL);
    sct_text_add(out, "\r\n");
}

sct_status sct_schedule_csv(const sct_result *result, sct_text *out)
{
    add_head(out, result);
    add_members(out, result);
    const bool done = add_totals(out, result, false) && add_totals(out, result, true);
    add_grand_total(out, result);
    if (result->has_bent && result->ends != NULL) add_ends(out, result);
    for (int i = 0; i < result->n_warnings; i++) add_words(out, result, "warning", result->warnings[i]);
    add_words(out, result, "caution", SCT_CAUTION);
    return !done || out->failed ? SCT_NO_MEMORY : SCT_OK;
}
