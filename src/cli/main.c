/* scantling: finds the command and runs it. */
#define _XOPEN_SOURCE 700
#include <errno.h>
#include <fcntl.h>
#include <signal.h>
#include <stdbool.h>
#include <stdio.h>
#include <string.h>
#include <unistd.h>

#include "cli/commands.h"
#include "cli/exits.h"
#include "cli/messages.h"

static void version(void)
{
    printf("scantling %s\nmodel format %d, result format %d, explanation format %d\n", sct_version(), SCT_MODEL_FORMAT,
           SCT_RESULT_FORMAT, SCT_EXPLANATION_FORMAT);
}

static int run(int argc, char **argv)
{
    if (argc < 2) {
        cli_overview(stderr);
        return EXIT_USAGE;
    }
    if (strcmp(argv[1], "--help") == 0 || strcmp(argv[1], "-h") == 0) {
        cli_overview(stdout);
        return EXIT_KEPT;
    }
    if (strcmp(argv[1], "--version") == 0) {
        version();
        return EXIT_KEPT;
    }
    const cli_command *command = cli_find_command(argv[1]);
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

/* A standard stream that is closed is held by one that fails, so that no file of ours gets its number. False: none is
 * left to hold it. */
static bool hold_streams(void)
{
    for (int fd = STDIN_FILENO; fd <= STDERR_FILENO; fd++) {
        if (fcntl(fd, F_GETFD) != -1) continue;
        if (open("/dev/null", fd == STDIN_FILENO ? O_WRONLY : O_RDONLY) != fd) return false;
    }
    return true;
}

int main(int argc, char **argv)
{
    signal(SIGPIPE, SIG_IGN); /* a reader that goes away, */
    signal(SIGXFSZ, SIG_IGN); /* or a file that may not grow, is an output that cannot be written: exit code 6 */
    if (!hold_streams()) return EXIT_OUTPUT;
    const int code = run(argc, argv);
    if (fflush(stdout) != 0 || ferror(stdout)) {
        cli_say("error", "standard output cannot be written: %s", strerror(errno));
        return EXIT_OUTPUT;
    }
    return code;
}
