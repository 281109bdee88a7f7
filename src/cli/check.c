/* scantling check: verifies given sizes. */
#include "cli/commands.h"
#include "cli/exits.h"
#include "cli/run.h"

static int run_check(const cli_command *command, const char *const given[], char *const operands[])
{
    cli_run run;
    int code = cli_run_open(&run, command, given, operands[0]);
    if (code == 0) code = cli_exit_of_status(sct_check(run.model, NULL, &run.result, run.issues));
    if (code == 0) code = cli_run_report(&run, false);
    return cli_run_close(&run, code);
}

const cli_command CLI_CHECK = {
    .name = "check",
    .operands = "MODEL",
    .n_operands = 1,
    .purpose = "Checks the sizes that MODEL gives against every limit in every combination.",
    .examples = "  scantling check build/demo/model.json\n"
                "  scantling check --json build/demo/model.json | jq .utilisation",
    .more =
        "MODEL is a model file, or - for standard input. Exit code: 0 every limit kept, 1 some limit not kept,\n"
        "2 command line, 3 input, 4 cannot be analysed, 6 output, 7 out of memory or too large, 70 internal check.\n"
        "With -o: result.json, schedule.csv, drawing.svg.",
    .n_options = CLI_N_OUTPUT_OPTIONS,
    .options = {CLI_OUTPUT_OPTIONS},
    .run = run_check,
};
