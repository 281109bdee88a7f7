/* The commands: which there are. */
#include "cli/commands.h"

#include <string.h>

#include "cli/messages.h"
#include "scantling.h"

static const cli_command *const COMMANDS[] = {&CLI_SIZE, &CLI_CHECK, &CLI_EXPLAIN, &CLI_HELP, &CLI_COMPLETION};
enum { N_COMMANDS = sizeof COMMANDS / sizeof COMMANDS[0] };

const char *const CLI_WHEN[] = {"auto", "always", "never", NULL};

const cli_command *const *cli_commands(int *n)
{
    *n = N_COMMANDS;
    return COMMANDS;
}

const cli_command *cli_find_command(const char *name)
{
    const char *names[N_COMMANDS + 2];
    for (int i = 0; i < N_COMMANDS; i++) {
        if (strcmp(COMMANDS[i]->name, name) == 0) return COMMANDS[i];
        names[i] = COMMANDS[i]->name;
    }
    names[N_COMMANDS] = "--help";
    names[N_COMMANDS + 1] = "--version";
    const char *what = name[0] == '-' ? "option" : "command", *near = sct_nearest(names, N_COMMANDS + 2, name);
    if (near != NULL)
        cli_say("error", "no %s \"%.200s\"; did you mean \"%s\"?", what, name, near);
    else
        cli_say("error", "no %s \"%.200s\"; scantling --help lists what there is", what, name);
    return NULL;
}

void cli_overview(FILE *out)
{
    fprintf(out, "  scantling size models/demo_roof.json -o build/demo --force\n"
                 "  scantling explain build/demo/model.json --member T4\n\n"
                 "usage: scantling COMMAND [OPTION...] [MODEL]\n\n"
                 "Sizes the members of roof trusses: the lightest sections that keep every limit.\n\n");
    for (int i = 0; i < N_COMMANDS; i++) fprintf(out, "  %-10s %s\n", COMMANDS[i]->name, COMMANDS[i]->purpose);
    fprintf(out, "\nscantling COMMAND --help tells more; scantling --version names the version.\n\n%s\n", SCT_CAUTION);
}
