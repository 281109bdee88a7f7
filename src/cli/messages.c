/* What is said on standard error. */
#define _POSIX_C_SOURCE 200809L
#include "cli/messages.h"

#include <stdarg.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

void cli_say(const char *severity, const char *format, ...)
{
    char message[1024];
    va_list args;
    va_start(args, format);
    vsnprintf(message, sizeof message, format, args);
    va_end(args);
    const sct_issue issue = {.severity = severity[0] == 'e' ? SCT_ERROR : severity[0] == 'w' ? SCT_WARNING : SCT_NOTE,
                             .file = "scantling", .message = message};
    char *line = sct_issue_line(&issue);
    fprintf(stderr, "%s\n", line != NULL ? line : message);
    free(line);
}

void cli_issues(const sct_issues *issues, bool quiet)
{
    int shown = 0;
    for (int i = 0; i < sct_issues_count(issues); i++) {
        const sct_issue *issue = sct_issues_get(issues, i);
        shown += issue->severity == SCT_ERROR;
        if (quiet && issue->severity != SCT_ERROR) continue;
        char *line = sct_issue_line(issue);
        fprintf(stderr, "%s\n", line != NULL ? line : issue->message);
        free(line);
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
