/* Command line options: one table per command feeds the parser, the help and the completion. */
#ifndef SCT_CLI_OPTIONS_H
#define SCT_CLI_OPTIONS_H

#include <stdbool.h>

/* One option. value: the name of its argument in the help; NULL for a switch. */
typedef struct cli_option {
    char letter; /* 0: long form only */
    const char *name;
    const char *value;
    const char *help;
    const char *const *words; /* the values that it takes, NULL-terminated; NULL: any */
} cli_option;

enum { CLI_MOST_OPTIONS = 24 };

typedef struct cli_command {
    const char *name;
    const char *operands;     /* "MODEL" */
    int n_operands;           /* 1 */
    bool is_operand_optional; /* operands[0] is NULL where it was not given */
    const char *purpose;      /* one line */
    const char *examples;     /* lines that run as they stand, first in the help */
    const char *more;         /* further text at the end of the help, or NULL */
    int n_options;
    cli_option options[CLI_MOST_OPTIONS];
    int (*run)(const struct cli_command *command, const char *const given[], char *const operands[]);
} cli_command;

/* Options of one command line: given[i] is the argument of options[i], "" for a switch that is set, NULL when it was
 * not given. Returns 0, or the exit code after a message. */
int cli_parse(const cli_command *command, int argc, char **argv, const char *given[CLI_MOST_OPTIONS],
              char *const **operands, bool *help);

void cli_help(const cli_command *command);

/** What was given for the option of this name; NULL when it was not given. */
const char *cli_given(const cli_command *command, const char *const given[], const char *name);

/** Whole number or number of an option; false after a message when the text is not one or is out of range. */
bool cli_whole(const cli_command *command, const char *const given[], const char *name, int least, int most,
               int *value);
bool cli_number(const cli_command *command, const char *const given[], const char *name, double *value);

/** One of the words of an option; the index in *value. */
bool cli_word(const cli_command *command, const char *const given[], const char *name, int *value);
#endif
