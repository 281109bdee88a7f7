/* The families of sections of a model file: its own, and the shipped ones that it names. */
#include <math.h>

#include "families.h"
#include "reader.h"

const sct_range SCT_AREAS = {"an area", SCT_AREA, 1e-9, 1e3, 1e-6, 0.1, NULL};
static const sct_key AXES[2] = {{"in_plane", "a value for bending in the plane of the truss"},
                                {"out_of_plane", "a value for bending out of the plane of the truss"}};

bool sct_read_both_axes(sct_reader *r, const sct_node *node, const sct_range *range, double v[2])
{
    const sct_node *found[2];
    if (node == NULL) return false;
    if (sct_node_kind_of(node) != SCT_OBJECT) {
        const bool read = sct_fields_value(&r->f, node, range, &v[0]);
        v[1] = v[0];
        return read;
    }
    if (!sct_fields_keys(&r->f, node, range->what, AXES, 2, found)) return false;
    const bool first = sct_fields_value(&r->f, found[0], range, &v[0]);
    return sct_fields_value(&r->f, found[1], range, &v[1]) && first;
}

/* W and J, where given. */
static void read_stiff_properties(sct_reader *r, const sct_node *W, const sct_node *J, sct_section *section)
{
    static const sct_range MODULUS = {"a section modulus", SCT_SECTION_MODULUS, 1e-15, 10, 1e-8, 1e-2, NULL};
    static const sct_range TORSION = {"a torsion constant", SCT_SECOND_MOMENT, 1e-18, 1e2, 1e-11, 1e-3, NULL};
    static const double ROUNDED = 1.02; /* tables are */
    section->W[0] = section->W[1] = section->J = (double)NAN;
    sct_fields_value(&r->f, J, &TORSION, &section->J);
    if (!sct_read_both_axes(r, W, &MODULUS, section->W)) return;
    if (!(section->depth > 0) || !(section->I[SCT_IN_PLANE] > 0)) return;
    const double most = 2 * section->I[SCT_IN_PLANE] / section->depth;
    if (section->W[SCT_IN_PLANE] > most * ROUNDED)
        sct_fields_remark(&r->f, SCT_WARNING, W,
                          "W = %g m3 in plane is more than 2 I / depth = %g m3, the most that a section of this second "
                          "moment and depth can have",
                          section->W[SCT_IN_PLANE], most);
}

static void read_section(sct_reader *r, const sct_node *node, sct_section *section)
{
    static const sct_range SECOND_MOMENT = {
        "a second moment of area", SCT_SECOND_MOMENT, 1e-18, 1e2, 1e-10, 1e-3, NULL};
    static const sct_range DEPTH = {"a depth", SCT_LENGTH, 1e-4, 10, 5e-3, 3, "60 mm"};
    enum { K_AREA, K_I, K_DEPTH, K_W, K_J, N };
    static const sct_key KEYS[N] = {{"A", "its area"},
                                    {"I", "its second moment of area, or one for each axis"},
                                    {"depth", NULL},
                                    {"W", NULL},
                                    {"J", NULL}};
    const sct_node *found[N];
    sct_fields_name(&r->f, node, &section->name);
    if (!sct_fields_keys(&r->f, node, "a section", KEYS, N, found)) return;
    const bool has_A = sct_fields_value(&r->f, found[K_AREA], &SCT_AREAS, &section->A);
    const bool has_I = sct_read_both_axes(r, found[K_I], &SECOND_MOMENT, section->I);
    const bool has_depth = sct_fields_value(&r->f, found[K_DEPTH], &DEPTH, &section->depth);
    read_stiff_properties(r, found[K_W], found[K_J], section);
    if (!has_depth || !has_A || !has_I) return;
    const double most = section->A * section->depth * section->depth / 4.0; /* all of A at the outermost fibres */
    if (section->I[SCT_IN_PLANE] > most)
        sct_fields_remark(
            &r->f, SCT_WARNING, found[K_I],
            "I = %g m4 in plane is more than A depth^2 / 4 = %g m4, the most that a section of this area and "
            "depth can have",
            section->I[SCT_IN_PLANE], most);
}

/* Room for a family and its names; false when out of memory. */
static bool add_family(sct_reader *r, const sct_family *family)
{
    sct_model *m = r->model;
    const int i = m->n_families;
    sct_names *names = sct_names_new(family->n);
    r->sections[i] = names;
    bool put = names != NULL && sct_names_put(r->families, family->name, i);
    for (int k = 0; k < family->n && put; k++) put = sct_names_put(names, family->sections[k].name, k);
    if (!put) r->f.failure = SCT_NO_MEMORY;
    m->families[m->n_families++] = *family;
    return put;
}

static void read_family(sct_reader *r, const sct_node *node)
{
    static const sct_key KEYS[] = {{"sections", "an object with at least one section, keyed by name"}};
    const sct_node *sections;
    sct_family family = {.where = sct_fields_where(&r->f, node)};
    if (!sct_fields_name(&r->f, node, &family.name)) return;
    if (sct_family_find(family.name) >= 0) {
        sct_fields_key_error(&r->f, node, "\"%s\" is a family that comes with the program; give yours another name",
                             family.name);
        return;
    }
    if (!sct_fields_keys(&r->f, node, "a family", KEYS, 1, &sections)) return;
    const int n = sections == NULL ? 0 : sct_reader_count(r, sections, "section", SCT_MOST_MEMBERS);
    family.sections = sct_fields_array(&r->f, n, sizeof *family.sections);
    if (family.sections == NULL || n == 0) return;
    for (const sct_node *c = sct_node_first(sections); c != NULL; c = sct_node_next(c)) {
        sct_section *section = &family.sections[family.n++];
        read_section(r, c, section);
        if (section->name == NULL) return; /* out of memory */
    }
    if (!sct_sections_sort(family.sections, n))
        r->f.failure = SCT_NO_MEMORY;
    else
        add_family(r, &family);
}

void sct_read_families(sct_reader *r, const sct_node *node)
{
    const bool is_there = sct_fields_is(&r->f, node, SCT_OBJECT, "an object of families, keyed by name");
    r->families_room = (is_there ? sct_node_count(node) : 0) + sct_n_shipped_families;
    r->families = sct_names_new(r->families_room);
    if (r->families == NULL) r->f.failure = SCT_NO_MEMORY;
    r->sections = sct_fields_array(&r->f, r->families_room, sizeof *r->sections);
    r->model->families = sct_fields_array(&r->f, r->families_room, sizeof *r->model->families);
    r->families_are_wrong = node != NULL && !is_there;
    if (!is_there) return;
    const int errors_before = r->f.n_errors;
    for (const sct_node *c = sct_node_first(node); c != NULL && r->f.failure == SCT_OK; c = sct_node_next(c))
        read_family(r, c);
    r->families_are_wrong = r->f.n_errors > errors_before;
}

int sct_reader_family(sct_reader *r, const sct_node *node)
{
    const char *name;
    if (!sct_fields_string(&r->f, node, "the name of a family", &name)) return -1;
    const int known = sct_names_find(r->families, name);
    if (known >= 0) return known;
    const int shipped = sct_family_find(name);
    if (shipped < 0 && r->families_are_wrong) return -1;
    if (shipped < 0) { /* the nearest name may be of either kind */
        sct_names *all = sct_names_new(r->families_room);
        int index = -1;
        bool put = all != NULL;
        for (int i = 0; i < sct_n_shipped_families && put; i++)
            put = sct_names_put(all, sct_shipped_families[i].name, i);
        for (int i = 0; i < r->model->n_families && put; i++) put = sct_names_put(all, r->model->families[i].name, i);
        if (put)
            sct_fields_reference(&r->f, node, "family", all, &index);
        else
            r->f.failure = SCT_NO_MEMORY;
        sct_names_free(all);
        return -1;
    }
    sct_family family;
    const sct_status status = sct_family_load(&sct_shipped_families[shipped], r->f.arena, &family);
    if (status != SCT_OK) {
        r->f.failure = status;
        return -1;
    }
    return add_family(r, &family) ? r->model->n_families - 1 : -1;
}
