/* Issues: messages for a person, each with its place. The list is public; how messages get in is here. */
#ifndef SCT_BASE_ISSUES_H
#define SCT_BASE_ISSUES_H

#include <stdbool.h>

#include "scantling.h"

/* Where a thing stands in the input. Every object of a model keeps one, so that later stages can point at it. */
typedef struct sct_where {
    const char *file;
    int line, column;    /* from 1; 0: no place */
    const char *pointer; /* JSON pointer; NULL: none */
} sct_where;

/** Adds a message; all strings are copied. Above 20 errors they are only counted, and so are warnings above 50.
 * A NULL list is allowed: the message is lost. */
__attribute__((format(printf, 4, 5))) void sct_issue_add(sct_issues *issues, sct_severity severity, sct_where where,
                                                         const char *format, ...);

/** Were the words of some message lost for want of memory? A NULL list has lost none. */
bool sct_issues_lost(const sct_issues *issues);
#endif
