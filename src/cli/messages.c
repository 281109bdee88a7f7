/* What is said on standard error. */
#define _POSIX_C_SOURCE 200809L
#include "cli/messages.h"

#include <stdarg.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

static int colour_when; /* 0 auto, 1 always, 2 never */

void cli_colour_messages(int when)
{
    colour_when = when;
}

/* One line on standard error. The word of the severity is the only part with colour, and says the same without. */
static void put_issue(const sct_issue *issue)
{
    static const struct {
        const char *word, *escape;
    } LOOK[] = {[SCT_NOTE] = {": note: ", "\033[1m"},
                [SCT_WARNING] = {": warning: ", "\033[1;33m"},
                [SCT_ERROR] = {": error: ", "\033[1;31m"}};
    char *line = sct_issue_line(issue);
    if (line == NULL) {
        fprintf(stderr, "%s\n", issue->message);
        return;
    }
    const char *word = LOOK[issue->severity].word, *at = strstr(line, word);
    if (at != NULL && cli_colours(STDERR_FILENO, colour_when)) {
        const int before = (int)(at - line) + 2, size = (int)strlen(word) - 3;
        fprintf(stderr, "%.*s%s%.*s\033[0m%s\n", before, line, LOOK[issue->severity].escape, size, at + 2,
                at + 2 + size);
    } else {
        fprintf(stderr, "%s\n", line);
    }
    free(line);
}

void cli_say(const char *severity, const char *format, ...)
{
    char message[1024];
    va_list args;
    va_start(args, format);
    vsnprintf(message, sizeof message, format, args);
    va_end(args);
    const sct_issue issue = {.severity = severity[0] == 'e'   ? SCT_ERROR
                                         : severity[0] == 'w' ? SCT_WARNING
                                                              : SCT_NOTE,
                             .file = "scantling",
                             .message = message};
    put_issue(&issue);
}

void cli_issues(const sct_issues *issues, bool quiet)
{
    int shown = 0;
    for (int i = 0; i < sct_issues_count(issues); i++) {
        const sct_issue *issue = sct_issues_get(issues, i);
        shown += issue->severity == SCT_ERROR;
        if (quiet && issue->severity != SCT_ERROR) continue;
        put_issue(issue);
    }
    const int more = sct_issues_errors(issues) - shown;
    if (more > 0) fprintf(stderr, "scantling: %d more error%s not shown\n", more, more == 1 ? "" : "s");
}

bool cli_colours(int fd, int when)
{
    const char *no = getenv("NO_COLOR"), *term = getenv("TERM");
    if (when != 0) return when == 1;
    return isatty(fd) && (no == NULL || *no == '\0') && (term == NULL || strcmp(term, "dumb") != 0);
}
