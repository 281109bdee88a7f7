/* The gate: every byte of a model file is checked here once, before anything else reads it. */
#ifndef SCT_MODEL_GATE_H
#define SCT_MODEL_GATE_H

#include <stddef.h>
#include <stdint.h>

#include "base/issues.h"

enum {
    SCT_MOST_BYTES = 64 * 1024 * 1024,   /* of a file */
    SCT_MOST_STRING_BYTES = 1024 * 1024, /* of a string, as written between its quotes */
    SCT_MOST_NUMBER_CHARACTERS = 64,
    SCT_MOST_DEPTH = 64 /* arrays and objects inside one another */
};

/* Where one value stands. Lines and columns count from 1, columns in characters; LF, CR and CRLF each end a line. */
typedef struct sct_gate_value {
    uint32_t begin, end;         /* bytes begin <= i < end of the text; with quotes or brackets */
    uint32_t key_begin, key_end; /* the same of its key; both 0 where it has none */
    int line, column;
    int key_line, key_column; /* 0 where it has no key */
} sct_gate_value;

/**
 * Checks a text: JSON by RFC 8259 and nothing beside it, in UTF-8 (a leading byte order mark is passed over), no
 * \u0000, no key twice in an object, numbers that are finite doubles and do not vanish, and the limits above.
 *
 * file    stands for the text in messages
 * values  out: every value in document order (a container stands before its entries), for free(); NULL unless SCT_OK
 * n       out: their number
 *
 * SCT_OK; SCT_BAD_INPUT: the first error of syntax, and every doubled key before it, are in issues; SCT_TOO_LARGE: more
 * than SCT_MOST_BYTES; SCT_NO_MEMORY.
 * Source: RFC 8259 (grammar, doubled keys), RFC 3629 (UTF-8).
 */
sct_status sct_gate_check(const char *file, const char *text, size_t size, sct_gate_value **values, size_t *n,
                          sct_issues *issues);
#endif
