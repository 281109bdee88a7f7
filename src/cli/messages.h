/* What is said on standard error. */
#ifndef SCT_CLI_MESSAGES_H
#define SCT_CLI_MESSAGES_H

#include <stdbool.h>

#include "scantling.h"

/** "scantling: SEVERITY: ..." on standard error; control characters of arguments are shown as \xNN. */
__attribute__((format(printf, 2, 3))) void cli_say(const char *severity, const char *format, ...);

/** All issues on standard error, one line each, and how many errors were not shown. quiet: errors only. */
void cli_issues(const sct_issues *issues, bool quiet);

/** When messages have colour: as `when` below; until it is called, auto. */
void cli_colour_messages(int when);

/** Is a stream to be coloured? when: 0 auto, 1 always, 2 never. By the NO_COLOR convention (no-color.org). */
bool cli_colours(int fd, int when);
#endif
