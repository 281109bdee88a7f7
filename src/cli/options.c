/* Command line options: POSIX and GNU conventions by getopt_long, with messages that help. */
#define _GNU_SOURCE
#include "cli/options.h"

#include <errno.h>
#include <getopt.h>
#include <limits.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "cli/exits.h"
#include "cli/messages.h"

enum { FIRST_CODE = 256 };

static int usage_fault(const cli_command *command)
{
    fprintf(stderr, "usage: scantling %s [OPTION...] %s\n       scantling %s --help tells more\n", command->name,
            command->operands, command->name);
    return EXIT_USAGE;
}

static int unknown_option(const cli_command *command, const char *word)
{
    const char *names[CLI_MOST_OPTIONS + 1];
    for (int i = 0; i < command->n_options; i++) names[i] = command->options[i].name;
    names[command->n_options] = "help";
    char name[64];
    snprintf(name, sizeof name, "%.*s", (int)strcspn(word + strspn(word, "-"), "="), word + strspn(word, "-"));
    const char *near = sct_nearest(names, command->n_options + 1, name);
    if (near != NULL && strcmp(near, name) == 0) cli_say("error", "option --%s takes no value", name);
    else if (near != NULL) cli_say("error", "no option %s; did you mean --%s?", word, near);
    else cli_say("error", "no option %s", word);
    return usage_fault(command);
}

int cli_parse(const cli_command *command, int argc, char **argv, const char *given[CLI_MOST_OPTIONS],
              char *const **operands, bool *help)
{
    struct option longs[CLI_MOST_OPTIONS + 2] = {0};
    char letters[2 * CLI_MOST_OPTIONS + 4] = ":h";
    size_t n_letters = 2;
    for (int i = 0; i < command->n_options; i++) {
        const cli_option *o = &command->options[i];
        given[i] = NULL;
        longs[i] = (struct option){o->name, o->value != NULL ? required_argument : no_argument, NULL, FIRST_CODE + i};
        if (o->letter == 0) continue;
        letters[n_letters++] = o->letter;
        if (o->value != NULL) letters[n_letters++] = ':';
    }
    letters[n_letters] = '\0';
    longs[command->n_options] = (struct option){"help", no_argument, NULL, 'h'};
    opterr = 0;
    optind = 1;
    for (int code; (code = getopt_long(argc, argv, letters, longs, NULL)) != -1;) {
        if (code == 'h') {
            *help = true;
            return 0;
        }
        if (code == ':') {
            cli_say("error", "option %s needs a value", argv[optind - 1]);
            return usage_fault(command);
        }
        if (code == '?') {
            char letter[3] = {'-', (char)optopt, '\0'};
            const bool is_letter = optopt > 0 && optopt < FIRST_CODE;
            return unknown_option(command, is_letter ? letter : argv[optind - 1]);
        }
        int i = code - FIRST_CODE;
        for (int k = 0; code < FIRST_CODE && k < command->n_options; k++)
            if (command->options[k].letter == code) i = k;
        if (given[i] != NULL) {
            cli_say("error", "option --%s is given twice", command->options[i].name);
            return usage_fault(command);
        }
        given[i] = optarg != NULL ? optarg : "";
    }
    if (argc - optind != command->n_operands) {
        if (argc - optind > command->n_operands)
            cli_say("error", "unexpected argument \"%s\"", argv[optind + command->n_operands]);
        else cli_say("error", "%s is missing", command->operands);
        return usage_fault(command);
    }
    for (int i = optind; i < argc; i++)
        if (argv[i][0] == '\0') {
            cli_say("error", "%s is an empty name", command->operands);
            return usage_fault(command);
        }
    *operands = argv + optind;
    return 0;
}

void cli_help(const cli_command *command)
{
    printf("%s\n\nusage: scantling %s [OPTION...] %s\n\n%s\n", command->examples, command->name, command->operands,
           command->purpose);
    printf("\noptions\n");
    for (int i = 0; i < command->n_options; i++) {
        const cli_option *o = &command->options[i];
        char left[64];
        const char letter[5] = {o->letter ? '-' : ' ', o->letter ? o->letter : ' ', o->letter ? ',' : ' ', ' ', '\0'};
        snprintf(left, sizeof left, "%s--%s%s%s", letter, o->name, o->value != NULL ? "=" : "",
                 o->value != NULL ? o->value : "");
        printf("  %-27s %s\n", left, o->help);
    }
    printf("  -h, --help                  this text\n");
    if (command->more != NULL) printf("\n%s\n", command->more);
    printf("\n%s\n", SCT_CAUTION);
}

const char *cli_given(const cli_command *command, const char *const given[], const char *name)
{
    for (int i = 0; i < command->n_options; i++)
        if (strcmp(command->options[i].name, name) == 0) return given[i];
    return NULL;
}

bool cli_number(const cli_command *command, const char *const given[], const char *name, double *value)
{
    const char *text = cli_given(command, given, name);
    if (text == NULL) return true;
    char *end;
    errno = 0;
    const double x = strtod(text, &end);
    if (*text == '\0' || *end != '\0' || strspn(text, " \t\n") > 0 || !isfinite(x)) {
        cli_say("error", "--%s: found \"%s\"; expected a number", name, text);
        return false;
    }
    *value = x;
    return true;
}

bool cli_whole(const cli_command *command, const char *const given[], const char *name, int least, int most, int *value)
{
    const char *text = cli_given(command, given, name);
    if (text == NULL) return true;
    char *end;
    errno = 0;
    const long x = strtol(text, &end, 10);
    if (*text == '\0' || *end != '\0' || strspn(text, " \t\n+") > 0 || errno != 0 || x < least || x > most) {
        cli_say("error", "--%s: found \"%s\"; expected a whole number from %d to %d", name, text, least, most);
        return false;
    }
    *value = (int)x;
    return true;
}

bool cli_word(const cli_command *command, const char *const given[], const char *name, const char *const words[],
              int *value)
{
    const char *text = cli_given(command, given, name);
    if (text == NULL) return true;
    char list[120] = "";
    for (int i = 0; words[i] != NULL; i++) {
        if (strcmp(text, words[i]) == 0) {
            *value = i;
            return true;
        }
        if (i > 0) strncat(list, ", ", sizeof list - strlen(list) - 1);
        strncat(list, words[i], sizeof list - strlen(list) - 1);
    }
    cli_say("error", "--%s: found \"%s\"; expected one of %s", name, text, list);
    return false;
}
