/* A JSON document in memory, with the place of every value: a tree of nodes in document order. */
#ifndef SCT_MODEL_DOCUMENT_H
#define SCT_MODEL_DOCUMENT_H

#include <stdbool.h>
#include <stddef.h>

#include "base/issues.h"
#include "base/text.h"

typedef struct sct_document sct_document;
typedef struct sct_node sct_node; /* borrowed from its document */

typedef enum sct_node_kind {
    SCT_NULL,
    SCT_FALSE,
    SCT_TRUE,
    SCT_NUMBER,
    SCT_STRING,
    SCT_ARRAY,
    SCT_OBJECT
} sct_node_kind;

/* Bytes begin <= i < end of the text that was parsed. */
typedef struct sct_span {
    size_t begin, end;
} sct_span;

/**
 * Checks the text (model/gate.h: strict JSON, no key twice) and makes the tree.
 *
 * file   stands for the text in messages; borrowed
 * text   size bytes and a zero behind them; not kept
 * document  out: NULL unless SCT_OK
 *
 * SCT_BAD_INPUT (issues say what and where), SCT_TOO_LARGE, SCT_NO_MEMORY.
 */
sct_status sct_document_parse(const char *file, const char *text, size_t size, sct_document **document,
                              sct_issues *issues);
void sct_document_free(sct_document *document);
const sct_node *sct_document_root(const sct_document *document);

sct_node_kind sct_node_kind_of(const sct_node *node);
/** "a number", "an object", ...: for messages. */
const char *sct_node_kind_words(const sct_node *node);
/** The key it stands under; NULL for array entries and the root. */
const char *sct_node_key(const sct_node *node);
/** The value of a number; NAN for other kinds. */
double sct_node_number(const sct_node *node);
/** The text of a string; NULL for other kinds. */
const char *sct_node_string(const sct_node *node);

/* Walking, in document order: for (c = sct_node_first(n); c != NULL; c = sct_node_next(c)) ... */
const sct_node *sct_node_first(const sct_node *node); /* first entry of an array or object; NULL: none */
const sct_node *sct_node_next(const sct_node *node);  /* next entry of the same array or object; NULL: was the last */
const sct_node *sct_node_parent(const sct_node *node);
int sct_node_count(const sct_node *node); /* entries of an array or object; 0 for other kinds */
/** The entry of an object with exactly this key; NULL: none. Looks at one entry after the other. */
const sct_node *sct_node_find(const sct_node *node, const char *key);

/** Appends the JSON pointer (RFC 6901), "" for the root. */
void sct_node_pointer(const sct_node *node, sct_text *out);
/** The place of the value, or of its key (of the value where it has none); `pointer` is left NULL: set it where it is
 * wanted. */
sct_where sct_node_where(const sct_document *document, const sct_node *node);
sct_where sct_node_key_where(const sct_document *document, const sct_node *node);
#endif
