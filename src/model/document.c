/* A JSON document: cJSON's tree and the gate's places, joined by one walk over both in document order. The only file
 * that knows cJSON. It is used for its tree alone: no look-up (case-blind or from the start), no index, no valueint. */
#include "document.h"

#include <cJSON.h>
#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include "gate.h"

struct sct_node {
    const cJSON *item;
    const sct_gate_value *at;
    const sct_node *parent, *next;
    uint32_t index; /* among its siblings */
    uint32_t count; /* of its entries; the first is the node behind this one */
};

struct sct_document {
    const char *file;
    cJSON *tree;
    sct_gate_value *places;
    size_t n;
    sct_node *nodes; /* in document order, as `places` */
};

/* Fills the nodes. The gate bounds the depth, and cJSON gives every parent's entries in order, so a stack of the open
 * containers' last entries is all the memory that the walk needs. False: the tree does not fit the places. */
static bool join(sct_document *d)
{
    sct_node *open[SCT_MOST_DEPTH];
    int depth = 0;
    size_t n = 0;
    const cJSON *item = d->tree;
    sct_node *before = NULL;
    while (item != NULL) {
        if (n == d->n) return false;
        sct_node *node = &d->nodes[n];
        sct_node *parent = depth > 0 ? open[depth - 1] : NULL;
        *node = (sct_node){.item = item, .at = &d->places[n], .parent = parent};
        n++;
        if (parent != NULL) node->index = parent->count++;
        if (before != NULL) before->next = node;
        before = node;
        if (item->child != NULL) {
            if (depth == SCT_MOST_DEPTH) return false;
            open[depth++] = node;
            before = NULL;
            item = item->child;
            continue;
        }
        while (item->next == NULL && depth > 0) {
            before = open[--depth];
            item = before->item;
        }
        item = depth > 0 ? item->next : NULL;
    }
    return n == d->n;
}

sct_status sct_document_parse(const char *file, const char *text, size_t size, sct_document **document,
                              sct_issues *issues)
{
    *document = NULL;
    sct_document *d = calloc(1, sizeof *d);
    if (d == NULL) return SCT_NO_MEMORY;
    d->file = file;
    sct_status status = sct_gate_check(file, text, size, &d->places, &d->n, issues);
    if (status == SCT_OK) {
        /* the gate has accepted the text: a NULL of cJSON can only mean that memory ran out */
        d->tree = cJSON_ParseWithLength(text, size + 1);
        d->nodes = d->tree == NULL ? NULL : malloc(d->n * sizeof *d->nodes);
        if (d->nodes == NULL)
            status = SCT_NO_MEMORY;
        else if (!join(d))
            status = SCT_SELF_CHECK;
    }
    if (status != SCT_OK) {
        sct_document_free(d);
        return status;
    }
    *document = d;
    return SCT_OK;
}

void sct_document_free(sct_document *d)
{
    if (d == NULL) return;
    cJSON_Delete(d->tree);
    free(d->places);
    free(d->nodes);
    free(d);
}

const sct_node *sct_document_root(const sct_document *d)
{
    return d->nodes;
}

sct_node_kind sct_node_kind_of(const sct_node *node)
{
    switch (node->item->type & 0xFF) { /* the low byte is the kind, above are flags of ownership */
    case cJSON_False: return SCT_FALSE;
    case cJSON_True: return SCT_TRUE;
    case cJSON_Number: return SCT_NUMBER;
    case cJSON_String: return SCT_STRING;
    case cJSON_Array: return SCT_ARRAY;
    case cJSON_Object: return SCT_OBJECT;
    default: return SCT_NULL;
    }
}

const char *sct_node_kind_words(const sct_node *node)
{
    static const char *const WORDS[] = {"null", "false", "true", "a number", "a string", "an array", "an object"};
    return WORDS[sct_node_kind_of(node)];
}

const char *sct_node_key(const sct_node *node)
{
    return node->item->string;
}

double sct_node_number(const sct_node *node)
{
    return sct_node_kind_of(node) == SCT_NUMBER ? node->item->valuedouble : (double)NAN;
}

const char *sct_node_string(const sct_node *node)
{
    return sct_node_kind_of(node) == SCT_STRING ? node->item->valuestring : NULL;
}

const sct_node *sct_node_first(const sct_node *node)
{
    return node->count > 0 ? node + 1 : NULL;
}

const sct_node *sct_node_next(const sct_node *node)
{
    return node->next;
}

const sct_node *sct_node_parent(const sct_node *node)
{
    return node->parent;
}

int sct_node_count(const sct_node *node)
{
    return (int)node->count;
}

const sct_node *sct_node_find(const sct_node *node, const char *key)
{
    for (const sct_node *c = sct_node_first(node); c != NULL; c = c->next)
        if (c->item->string != NULL && strcmp(c->item->string, key) == 0) return c;
    return NULL;
}

void sct_node_pointer(const sct_node *node, sct_text *out)
{
    const sct_node *path[SCT_MOST_DEPTH + 1];
    int depth = 0;
    for (; node->parent != NULL; node = node->parent) path[depth++] = node;
    while (depth-- > 0) {
        const char *key = path[depth]->item->string;
        if (key == NULL) {
            sct_text_format(out, "/%u", path[depth]->index);
            continue;
        }
        sct_text_add(out, "/");
        while (*key != '\0') {
            const size_t plain = strcspn(key, "~/");
            sct_text_bytes(out, key, plain);
            key += plain;
            if (*key == '\0') break;
            sct_text_add(out, *key++ == '~' ? "~0" : "~1");
        }
    }
}

sct_where sct_node_where(const sct_document *d, const sct_node *node)
{
    return (sct_where){.file = d->file, .line = node->at->line, .column = node->at->column};
}

sct_where sct_node_key_where(const sct_document *d, const sct_node *node)
{
    if (node->at->key_line == 0) return sct_node_where(d, node);
    return (sct_where){.file = d->file, .line = node->at->key_line, .column = node->at->key_column};
}
