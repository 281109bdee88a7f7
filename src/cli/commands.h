/* The commands: one file each. */
#ifndef SCT_CLI_COMMANDS_H
#define SCT_CLI_COMMANDS_H

#include <stdio.h>

#include "cli/options.h"

extern const cli_command CLI_SIZE, CLI_CHECK, CLI_EXPLAIN, CLI_HELP, CLI_COMPLETION;

/** All of them in the order of the overview: *n entries. */
const cli_command *const *cli_commands(int *n);

/** The command of this name; NULL after a message that names the nearest. */
const cli_command *cli_find_command(const char *name);

/** What scantling is and which commands there are. */
void cli_overview(FILE *out);

extern const char *const CLI_WHEN[]; /* auto, always, never */

/* clang-format off */
#define CLI_COLOR_OPTION {0, "color", "WHEN", "colour the summary and the messages", CLI_WHEN}

/* Options that size and check share. */
#define CLI_OUTPUT_OPTIONS                                                                                             \
    {'o', "output", "DIR", "write the outputs into this folder (made when missing)", NULL},                            \
    {'f', "force", NULL, "replace outputs that exist", NULL},                                                          \
    {0, "json", NULL, "print the whole result as JSON instead of the summary", NULL},                                  \
    {'q', "quiet", NULL, "print errors only", NULL},                                                                   \
    CLI_COLOR_OPTION,                                                                                                  \
    {0, "draw-loads", "COMBINATION", "show the loads of a combination in drawing.svg", NULL},                          \
    {0, "draw-deflected", "COMBINATION", "show the deflected shape under a combination in drawing.svg", NULL},         \
    {0, "draw-moment", "COMBINATION", "show bending moments: a combination, or envelope", NULL},                       \
    {0, "draw-shear", "COMBINATION", "show shear forces likewise", NULL},                                              \
    {0, "draw-axial", "COMBINATION", "show axial forces likewise", NULL}
/* clang-format on */
enum { CLI_N_OUTPUT_OPTIONS = 10 };
#endif
