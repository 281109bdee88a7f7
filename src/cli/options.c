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
    const bool may_lack = command->is_operand_optional;
    fprintf(stderr, "usage: scantling %s [OPTION...] %s%s%s\n       scantling %s --help tells more\n", command->name,
            may_lack ? "[" : "", command->operands, may_lack ? "]" : "", command->name);
    return EXIT_USAGE;
}

/* Names of the options that begin with `name`, of which there are several: "--draw-loads, --draw-deflected". */
static int ambiguous_option(const cli_command *command, const char *name)
{
    char list[200] = "";
    for (int i = 0; i < command->n_options; i++) {
        if (strncmp(command->options[i].name, name, strlen(name)) != 0) continue;
        const size_t used = strlen(list);
        snprintf(list + used, sizeof list - used, "%s--%s", used > 0 ? ", " : "", command->options[i].name);
    }
    cli_say("error", "option --%s is short for several: %s", name, list);
    return usage_fault(command);
}

/* An option that getopt_long refused: `word` as it was given. */
static int unknown_option(const cli_command *command, const char *word)
{
    const char *names[CLI_MOST_OPTIONS + 1];
    for (int i = 0; i < command->n_options; i++) names[i] = command->options[i].name;
    names[command->n_options] = "help";
    char name[64];
    snprintf(name, sizeof name, "%.*s", (int)strcspn(word + strspn(word, "-"), "="), word + strspn(word, "-"));
    int n_alike = 0;
    for (int i = 0; i <= command->n_options; i++) {
        const bool is_begun = word[0] == '-' && word[1] == '-' && strncmp(names[i], name, strlen(name)) == 0;
        if (is_begun && strchr(word, '=') != NULL && strcmp(names[i], name) == 0) {
            cli_say("error", "option --%s takes no value; found \"%s\"", name, strchr(word, '=') + 1);
            return usage_fault(command);
        }
        n_alike += is_begun;
    }
    if (n_alike > 1) return ambiguous_option(command, name);
    const char *near = sct_nearest(names, command->n_options + 1, name);
    if (near != NULL && strcmp(near, name) == 0)
        cli_say("error", "option --%s takes no value", name);
    else if (near != NULL)
        cli_say("error", "no option %s; did you mean --%s?", word, near);
    else
        cli_say("error", "no option %s", word);
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
            const bool is_letter = optopt > 0 && optopt < FIRST_CODE && strncmp(argv[optind - 1], "--", 2) != 0;
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
        if (strcmp(command->options[i].name, "color") == 0) { /* from here on also for what is said of the others */
            int when = 0;
            if (!cli_word(command, given, "color", &when)) return usage_fault(command);
            cli_colour_messages(when);
        }
    }
    if (argc - optind != command->n_operands && !(argc == optind && command->is_operand_optional)) {
        if (argc - optind > command->n_operands)
            cli_say("error", "unexpected argument \"%s\"", argv[optind + command->n_operands]);
        else
            cli_say("error", "%s is missing", command->operands);
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
    const bool may_lack = command->is_operand_optional;
    printf("%s\n\nusage: scantling %s [OPTION...] %s%s%s\n\n%s\n", command->examples, command->name,
           may_lack ? "[" : "", command->operands, may_lack ? "]" : "", command->purpose);
    printf("\noptions\n");
    for (int i = 0; i < command->n_options; i++) {
        const cli_option *o = &command->options[i];
        char left[64];
        const char letter[5] = {o->letter ? '-' : ' ', o->letter ? o->letter : ' ', o->letter ? ',' : ' ', ' ', '\0'};
        snprintf(left, sizeof left, "%s--%s%s%s", letter, o->name, o->value != NULL ? "=" : "",
                 o->value != NULL ? o->value : "");
        printf("  %-27s %s", left, o->help);
        for (int k = 0; o->words != NULL && o->words[k] != NULL; k++) printf("%s%s", k > 0 ? ", " : ": ", o->words[k]);
        printf("\n");
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

bool cli_word(const cli_command *command, const char *const given[], const char *name, int *value)
{
    const char *text = cli_given(command, given, name);
    if (text == NULL) return true;
    static const char *const NONE[] = {NULL};
    const char *const *words = NONE;
    for (int i = 0; i < command->n_options; i++)
        if (strcmp(command->options[i].name, name) == 0 && command->options[i].words != NULL)
            words = command->options[i].words;
    char list[120] = "";
    int n = 0;
    for (; words[n] != NULL; n++) {
        if (strcmp(text, words[n]) == 0) {
            *value = n;
            return true;
        }
        if (n > 0) strncat(list, ", ", sizeof list - strlen(list) - 1);
        strncat(list, words[n], sizeof list - strlen(list) - 1);
    }
    const char *near = sct_nearest(words, n, text);
    if (near != NULL)
        cli_say("error", "--%s: found \"%s\"; did you mean \"%s\"?", name, text, near);
    else
        cli_say("error", "--%s: found \"%s\"; expected one of %s", name, text, list);
    return false;
}
