/* scantling help: the overview, or the help of one command. */
#include <stdio.h>

#include "cli/commands.h"
#include "cli/exits.h"

static int run_help(const cli_command *command, const char *const given[], char *const operands[])
{
    (void)command;
    (void)given;
    if (operands[0] == NULL) {
        cli_overview(stdout);
        return EXIT_KEPT;
    }
    const cli_command *about = cli_find_command(operands[0]);
    if (about == NULL) return EXIT_USAGE;
    cli_help(about);
    return EXIT_KEPT;
}

const cli_command CLI_HELP = {
    .name = "help",
    .operands = "COMMAND",
    .n_operands = 1,
    .is_operand_optional = true,
    .purpose = "Prints the options, examples and exit codes of a command.",
    .examples = "  scantling help size",
    .run = run_help,
};
