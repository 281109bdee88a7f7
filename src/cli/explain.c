/* scantling explain: one member's checks with the numbers put in. */
#include <stdlib.h>

#include "cli/commands.h"
#include "cli/exits.h"
#include "cli/messages.h"
#include "cli/run.h"

static int run_explain(const cli_command *command, const char *const given[], char *const operands[])
{
    const char *member = cli_given(command, given, "member");
    if (member == NULL) {
        cli_say("error", "--member is missing: which member is to be explained?");
        return EXIT_USAGE;
    }
    cli_run run;
    char *text = NULL;
    int code = cli_run_open(&run, command, given, operands[0]);
    if (code == 0) code = cli_exit_of_status(sct_check(run.model, NULL, &run.result, run.issues));
    if (code == 0)
        code = cli_exit_of_status((run.json ? sct_explain_json : sct_explain)(run.result, member, &text, run.issues));
    if (code == 0 && text != NULL) cli_put(text);
    if (code == EXIT_INPUT && run.result != NULL) code = EXIT_USAGE; /* no such member: a slip on the command line */
    if (code == 0) code = cli_exit_of_result(run.result);
    free(text);
    return cli_run_close(&run, code);
}

const cli_command CLI_EXPLAIN = {
    .name = "explain",
    .operands = "MODEL",
    .n_operands = 1,
    .purpose = "Prints the checks of one member of MODEL in every combination, with formula, numbers and result.",
    .examples = "  scantling explain build/demo/model.json --member T4\n"
                "  scantling explain build/demo/model.json --member T4 --json | jq .governing",
    .more = "MODEL must give every size: size writes such a model into its output folder. Exit code: as check.",
    .n_options = 4,
    .options = {{'m', "member", "NAME", "the member to explain", NULL},
                {0, "json", NULL, "print the checks as JSON: SI units, full precision", NULL},
                {'q', "quiet", NULL, "print no warnings", NULL},
                CLI_COLOR_OPTION},
    .run = run_explain,
};
