/* scantling: finds the command and runs it. */
#define _POSIX_C_SOURCE 200809L
#include <errno.h>
#include <signal.h>
#include <stdio.h>
#include <string.h>

#include "cli/commands.h"
#include "cli/exits.h"
#include "cli/messages.h"

static const cli_command *const COMMANDS[] = {&CLI_SIZE, &CLI_CHECK, &CLI_EXPLAIN};
enum { N_COMMANDS = sizeof COMMANDS / sizeof COMMANDS[0] };

static void help(FILE *out)
{
    fprintf(out, "  scantling size models/demo_roof.json -o build/demo\n"
                 "  scantling explain build/demo/model.json --member T4\n\n"
                 "usage: scantling COMMAND [OPTION...] MODEL\n\n"
                 "Sizes the members of roof trusses: the lightest sections that keep every limit.\n\n");
    for (int i = 0; i < N_COMMANDS; i++) fprintf(out, "  %-10s %s\n", COMMANDS[i]->name, COMMANDS[i]->purpose);
    fprintf(out, "\n  scantling COMMAND --help tells more; scantling --version names the version.\n\n%s\n", SCT_CAUTION);
}

static void version(void)
{
    printf("scantling %s\nmodel format %d, result format %d\n", sct_version(), SCT_MODEL_FORMAT, SCT_RESULT_FORMAT);
}

static const cli_command *find(const char *name)
{
    const char *names[N_COMMANDS];
    for (int i = 0; i < N_COMMANDS; i++) {
        if (strcmp(COMMANDS[i]->name, name) == 0) return COMMANDS[i];
        names[i] = COMMANDS[i]->name;
    }
    const char *near = sct_nearest(names, N_COMMANDS, name);
    if (near != NULL) cli_say("error", "no command \"%s\"; did you mean \"%s\"?", name, near);
    else cli_say("error", "no command \"%s\"; scantling --help lists them", name);
    return NULL;
}

static int run(int argc, char **argv)
{
    if (argc < 2) {
        help(stderr);
        return EXIT_USAGE;
    }
    if (strcmp(argv[1], "--help") == 0 || strcmp(argv[1], "-h") == 0) {
        help(stdout);
        return EXIT_KEPT;
    }
    if (strcmp(argv[1], "--version") == 0) {
        version();
        return EXIT_KEPT;
    }
    const cli_command *command = find(argv[1]);
    if (command == NULL) return EXIT_USAGE;
    const char *given[CLI_MOST_OPTIONS];
    char *const *operands = NULL;
    bool wants_help = false;
    const int fault = cli_parse(command, argc - 1, argv + 1, given, &operands, &wants_help);
    if (fault != 0) return fault;
    if (wants_help) {
        cli_help(command);
        return EXIT_KEPT;
    }
    return command->run(command, given, operands);
}

int main(int argc, char **argv)
{
    signal(SIGPIPE, SIG_IGN); /* a reader that goes away is an output that cannot be written: exit code 6 */
    signal(SIGXFSZ, SIG_IGN); /* and so is a limit on the size of files */
    const int code = run(argc, argv);
    if (fflush(stdout) != 0 || ferror(stdout)) {
        cli_say("error", "standard output cannot be written: %s", strerror(errno));
        return EXIT_OUTPUT;
    }
    return code;
}
