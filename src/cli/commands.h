/* The commands: one file each. */
#ifndef SCT_CLI_COMMANDS_H
#define SCT_CLI_COMMANDS_H

#include "cli/options.h"

extern const cli_command CLI_SIZE, CLI_CHECK, CLI_EXPLAIN;

/* Options that size and check share. */
#define CLI_OUTPUT_OPTIONS                                                                                             \
    {'o', "output", "DIR", "write the outputs into this folder (made when missing)"},                                  \
    {'f', "force", NULL, "replace outputs that exist"},                                                                \
    {0, "json", NULL, "print the whole result as JSON instead of the summary"},                                        \
    {'q', "quiet", NULL, "print errors only"},                                                                         \
    {0, "color", "WHEN", "colour the summary: auto, always, never"},                                                   \
    {0, "draw-loads", "COMBINATION", "show the loads of a combination in drawing.svg"},                                \
    {0, "draw-deflected", "COMBINATION", "show the deflected shape under a combination in drawing.svg"}
enum { CLI_N_OUTPUT_OPTIONS = 7 };
#endif
