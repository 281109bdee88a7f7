/* A model file written anew: its document is walked and printed, and the sizes are put in on the way. */
#include "model/rewrite.h"

#include <math.h>
#include <string.h>

#include "base/names.h"
#include "base/number.h"
#include "model/document.h"
#include "model/units.h"

enum {
    LINE_COLUMNS = 100, /* what fits stands on one line ... */
    LINE_LEVELS = 2,    /* ... unless it holds more levels of arrays and objects than these */
    INDENT = 2
};

typedef struct printer {
    const sct_model *model;
    const sct_size_choice *choice;
    const sct_names *group_names;
    const sct_node *groups; /* the object "groups" */
    sct_text *out;
    size_t line_start; /* where the current line begins in out->data */
} printer;

/* The group that this object describes, -1: it is no group. */
static int group_of(const printer *p, const sct_node *node)
{
    if (node == NULL || sct_node_parent(node) != p->groups || sct_node_kind_of(node) != SCT_OBJECT) return -1;
    return sct_names_find(p->group_names, sct_node_key(node));
}

/* The group whose size this entry gives: a free "area", or the "family" that gains a "section" behind it; else -1. */
static int sized_by(const printer *p, const sct_node *node, sct_sizing_kind kind, const char *key)
{
    const char *own = sct_node_key(node);
    if (own == NULL || strcmp(own, key) != 0) return -1;
    const int g = group_of(p, sct_node_parent(node));
    return g >= 0 && p->model->groups[g].kind == kind ? g : -1;
}

static int free_area_of(const printer *p, const sct_node *node)
{
    return sized_by(p, node, SCT_FREE_AREA, "area");
}

/* Not more than `most` levels of arrays and objects, counting this one. */
static bool has_levels(const printer *p, const sct_node *node, int most)
{
    const sct_node_kind kind = sct_node_kind_of(node);
    if ((kind != SCT_ARRAY && kind != SCT_OBJECT) || free_area_of(p, node) >= 0) return true;
    if (most == 0) return false;
    for (const sct_node *c = sct_node_first(node); c != NULL; c = sct_node_next(c)) {
        if (!has_levels(p, c, most - 1)) return false;
    }
    return true;
}

/* The area in a unit people use: the shortest decimal that reads back as A or, where there is none, as the next larger
 * double. A design that keeps its limits must not lose them by rounding. */
static void add_area(sct_text *out, double A, bool us_customary)
{
    const sct_unit *unit = sct_unit_find(us_customary ? "in2" : "mm2");
    char shown[SCT_NUMBER_ROOM];
    double x = sct_unit_from_SI(unit, A);
    while (sct_unit_to_SI(unit, x) >= A) x = nextafter(x, 0);
    while (sct_unit_to_SI(unit, x) < A) x = nextafter(x, INFINITY);
    double read = x;
    for (int digits = 1; digits <= 17; digits++) { /* 17 give x itself */
        sct_number_format(shown, sizeof shown, "%.*g", digits, x);
        if (!sct_number_read(shown, strlen(shown), &read)) continue;
        const double A_read = sct_unit_to_SI(unit, read);
        if (A_read >= A && A_read <= nextafter(A, INFINITY)) break;
    }
    sct_text_add(out, "\"");
    sct_text_number(out, read);
    sct_text_format(out, " %s\"", unit->name);
}

static void new_line(printer *p, int indent)
{
    sct_text_add(p->out, "\n");
    p->line_start = p->out->size;
    sct_text_format(p->out, "%*s", indent, "");
}

static void add_value(printer *p, const sct_node *node, int indent);

static void add_entry(printer *p, const sct_node *node, int indent)
{
    if (sct_node_key(node) != NULL) {
        sct_text_json(p->out, sct_node_key(node));
        sct_text_add(p->out, ": ");
    }
    add_value(p, node, indent);
}

/* The entries of an array or object; indent < 0: all on this line. */
static void add_entries(printer *p, const sct_node *node, int indent)
{
    const bool is_object = sct_node_kind_of(node) == SCT_OBJECT, is_tall = indent >= 0;
    const int inner = is_tall ? indent + INDENT : indent;
    sct_text_add(p->out, is_object ? "{" : "[");
    for (const sct_node *c = sct_node_first(node); c != NULL; c = sct_node_next(c)) {
        if (is_tall) new_line(p, inner);
        add_entry(p, c, inner);
        const int g = sized_by(p, c, SCT_LADDER, "family");
        if (g >= 0) {
            sct_text_add(p->out, is_tall ? "," : ", ");
            if (is_tall) new_line(p, inner);
            sct_text_add(p->out, "\"section\": ");
            sct_text_json(p->out, p->choice[g].section);
        }
        if (sct_node_next(c) != NULL) sct_text_add(p->out, is_tall ? "," : ", ");
    }
    if (is_tall && sct_node_first(node) != NULL) new_line(p, indent);
    sct_text_add(p->out, is_object ? "}" : "]");
}

static void add_container(printer *p, const sct_node *node, int indent)
{
    if (indent < 0) {
        add_entries(p, node, indent);
        return;
    }
    const size_t before = p->out->size;
    if (has_levels(p, node, LINE_LEVELS)) {
        add_entries(p, node, -1);
        if (p->out->failed || p->out->size - p->line_start <= LINE_COLUMNS) return;
        p->out->size = before;
    }
    add_entries(p, node, indent);
}

static void add_value(printer *p, const sct_node *node, int indent)
{
    const int g = free_area_of(p, node);
    if (g >= 0) {
        add_area(p->out, p->choice[g].A, p->model->us_customary);
        return;
    }
    switch (sct_node_kind_of(node)) {
    case SCT_NULL: sct_text_add(p->out, "null"); break;
    case SCT_FALSE: sct_text_add(p->out, "false"); break;
    case SCT_TRUE: sct_text_add(p->out, "true"); break;
    case SCT_NUMBER: sct_text_number(p->out, sct_node_number(node)); break;
    case SCT_STRING: sct_text_json(p->out, sct_node_string(node)); break;
    case SCT_ARRAY:
    case SCT_OBJECT: add_container(p, node, indent); break;
    }
}

static sct_names *names_of_groups(const sct_model *model)
{
    sct_names *names = sct_names_new(model->n_groups);
    for (int g = 0; names != NULL && g < model->n_groups; g++) {
        if (sct_names_put(names, model->groups[g].name, g)) continue;
        sct_names_free(names);
        names = NULL;
    }
    return names;
}

sct_status sct_model_rewrite(const sct_model *model, const sct_size_choice choice[], sct_text *out)
{
    sct_document *document = NULL;
    sct_names *names = names_of_groups(model);
    sct_status status = names != NULL ? SCT_OK : SCT_NO_MEMORY;
    if (status == SCT_OK) status = sct_document_parse(model->file, model->source, model->source_size, &document, NULL);
    if (status == SCT_OK) {
        const sct_node *root = sct_document_root(document);
        printer p = {model, choice, names, sct_node_find(root, "groups"), out, out->size};
        add_value(&p, root, 0);
        sct_text_add(out, "\n");
        if (out->failed) status = SCT_NO_MEMORY;
    }
    sct_document_free(document);
    sct_names_free(names);
    return status;
}
