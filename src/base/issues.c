/* Issues: messages for a person, each with its place. */
#include "issues.h"

#include <stdarg.h>
#include <stdbool.h>
#include <stdlib.h>
#include <string.h>

#include "arena.h"
#include "number.h"
#include "text.h"

enum { MOST_ERRORS = 20, MOST_OTHERS = 50, MESSAGE_ROOM = 2048 };

struct sct_issues {
    sct_arena *arena;
    sct_issue list[MOST_ERRORS + MOST_OTHERS + 1]; /* + 1: that more are not shown */
    int n, errors, others;
    bool lost; /* words of a message */
};

#define STATUS_TEXT(name, text) text,
const char *sct_status_text(sct_status status)
{
    static const char *const TEXTS[] = {SCT_STATUS_LIST(STATUS_TEXT)};
    return status >= 0 && status < SCT_STATUS_COUNT ? TEXTS[status] : "unknown status";
}

const char *sct_outcome_text(sct_outcome outcome)
{
    static const char *const TEXTS[] = {SCT_OUTCOME_LIST(STATUS_TEXT)};
    return outcome >= 0 && outcome < SCT_OUTCOME_COUNT ? TEXTS[outcome] : "unknown outcome";
}

const char *sct_check_text(sct_check_kind kind)
{
    static const char *const TEXTS[] = {SCT_CHECK_LIST(STATUS_TEXT)};
    return kind >= 0 && kind < SCT_CHECK_COUNT ? TEXTS[kind] : "unknown check";
}
#undef STATUS_TEXT

const char *sct_version(void)
{
    return SCT_VERSION;
}

sct_issues *sct_issues_new(void)
{
    sct_issues *issues = calloc(1, sizeof *issues);
    if (issues == NULL) return NULL;
    issues->arena = sct_arena_new();
    if (issues->arena == NULL) {
        free(issues);
        return NULL;
    }
    return issues;
}

void sct_issues_free(sct_issues *issues)
{
    if (issues == NULL) return;
    sct_arena_free(issues->arena);
    free(issues);
}

int sct_issues_count(const sct_issues *issues)
{
    return issues->n;
}

int sct_issues_errors(const sct_issues *issues)
{
    return issues->errors;
}

const sct_issue *sct_issues_get(const sct_issues *issues, int i)
{
    return i >= 0 && i < issues->n ? &issues->list[i] : NULL;
}

static const char *keep(sct_issues *issues, const char *text)
{
    if (text == NULL) return NULL;
    const char *copy = sct_arena_string(issues->arena, text, strlen(text));
    if (copy != NULL) return copy;
    issues->lost = true;
    return "(out of memory)";
}

bool sct_issues_lost(const sct_issues *issues)
{
    return issues != NULL && issues->lost;
}

/* Is the same remark there already? One job may look at a structure more than once. */
static bool is_told(const sct_issues *issues, sct_severity severity, sct_where where, const char *message)
{
    for (int i = 0; i < issues->n; i++) {
        const sct_issue *other = &issues->list[i];
        if (other->severity == severity && other->line == where.line && other->column == where.column &&
            strcmp(other->message, message) == 0)
            return true;
    }
    return false;
}

void sct_issue_add(sct_issues *issues, sct_severity severity, sct_where where, const char *format, ...)
{
    if (issues == NULL) return;
    if (severity == SCT_ERROR ? issues->errors++ >= MOST_ERRORS : issues->others > MOST_OTHERS) return;
    char message[MESSAGE_ROOM];
    va_list args;
    va_start(args, format);
    sct_number_vformat(message, sizeof message, format, args);
    va_end(args);
    if (severity != SCT_ERROR && is_told(issues, severity, where, message)) return;
    if (severity != SCT_ERROR && ++issues->others > MOST_OTHERS) {
        issues->list[issues->n++] = (sct_issue){
            .severity = SCT_NOTE, .file = keep(issues, where.file), .message = "more warnings and notes are not shown"};
        return;
    }
    issues->list[issues->n++] = (sct_issue){
        .severity = severity,
        .file = keep(issues, where.file),
        .line = where.line,
        .column = where.column,
        .pointer = keep(issues, where.pointer),
        .message = keep(issues, message),
    };
}

char *sct_issue_line(const sct_issue *issue)
{
    static const char *const WORDS[] = {"note", "warning", "error"};
    sct_text line = {0};
    if (issue->file != NULL) {
        sct_text_plain(&line, issue->file, 0);
        sct_text_add(&line, ":");
        if (issue->line > 0) sct_text_format(&line, "%d:%d:", issue->line, issue->column);
        sct_text_add(&line, " ");
    }
    sct_text_format(&line, "%s: ", WORDS[issue->severity]);
    if (issue->pointer != NULL && issue->pointer[0] != '\0') {
        sct_text_plain(&line, issue->pointer, 200);
        sct_text_add(&line, ": ");
    }
    sct_text_plain(&line, issue->message, 0);
    return sct_text_take(&line, NULL);
}
