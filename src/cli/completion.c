/* scantling completion: a script for the shell, made from the tables of options. */
#include <stdio.h>
#include <string.h>

#include "cli/commands.h"
#include "cli/exits.h"
#include "cli/messages.h"
#include "scantling.h"

static void put_words(const char *const words[])
{
    for (int i = 0; words[i] != NULL; i++) printf("%s%s", i > 0 ? " " : "", words[i]);
}

/* The arm of a case that completes the value of one option. */
static void put_value(const cli_command *command, const cli_option *o)
{
    if (o->value == NULL) return;
    printf("    %s:--%s", command->name, o->name);
    if (o->letter != 0) printf(" | %s:-%c", command->name, o->letter);
    printf(")\n");
    if (o->words != NULL) {
        printf("        mapfile -t COMPREPLY < <(compgen -W \"");
        put_words(o->words);
        printf("\" -- \"$word\")\n");
    } else if (strcmp(o->value, "DIR") == 0) {
        printf("        mapfile -t COMPREPLY < <(compgen -d -- \"$word\")\n        compopt -o filenames 2>/dev/null\n");
    } else {
        printf("        COMPREPLY=()\n");
    }
    printf("        return ;;\n");
}

static void put_options(const cli_command *command)
{
    printf("    %s) options=\"", command->name);
    for (int i = 0; i < command->n_options; i++) printf("--%s ", command->options[i].name);
    printf("--help\" ;;\n");
}

static void put_operand(const cli_command *command, const char *names)
{
    printf("    %s) ", command->name);
    if (strcmp(command->operands, "MODEL") == 0)
        printf("mapfile -t COMPREPLY < <(compgen -f -X '!*.json' -- \"$word\"; compgen -d -- \"$word\") ;;\n");
    else
        printf("mapfile -t COMPREPLY < <(compgen -W \"%s\" -- \"$word\") ;;\n",
               strcmp(command->operands, "COMMAND") == 0 ? names : "bash");
}

static void put_bash(void)
{
    int n;
    const cli_command *const *commands = cli_commands(&n);
    char names[200] = "";
    for (int i = 0; i < n; i++) {
        if (i > 0) strncat(names, " ", sizeof names - strlen(names) - 1);
        strncat(names, commands[i]->name, sizeof names - strlen(names) - 1);
    }
    printf("# bash completion of scantling %s; made by: scantling completion bash\n"
           "# shellcheck shell=bash\n"
           "_scantling()\n{\n"
           "    local word=${COMP_WORDS[COMP_CWORD]} before=${COMP_WORDS[COMP_CWORD - 1]} command=${COMP_WORDS[1]} "
           "options\n"
           "    if [ \"$word\" = \"=\" ]; then word=; elif [ \"$before\" = \"=\" ]; then "
           "before=${COMP_WORDS[COMP_CWORD - 2]}; fi\n"
           "    if [ \"$COMP_CWORD\" = 1 ]; then\n"
           "        mapfile -t COMPREPLY < <(compgen -W \"%s --help --version\" -- \"$word\")\n"
           "        return\n"
           "    fi\n"
           "    case $command:$before in\n",
           sct_version(), names);
    for (int i = 0; i < n; i++)
        for (int k = 0; k < commands[i]->n_options; k++) put_value(commands[i], &commands[i]->options[k]);
    printf("    esac\n    case $command in\n");
    for (int i = 0; i < n; i++) put_options(commands[i]);
    printf("    *) options=--help ;;\n    esac\n"
           "    if [ \"${word#-}\" != \"$word\" ]; then\n"
           "        mapfile -t COMPREPLY < <(compgen -W \"$options\" -- \"$word\")\n"
           "        return\n"
           "    fi\n"
           "    compopt -o filenames 2>/dev/null\n"
           "    case $command in\n");
    for (int i = 0; i < n; i++) put_operand(commands[i], names);
    printf("    esac\n}\ncomplete -F _scantling scantling\n");
}

static int run_completion(const cli_command *command, const char *const given[], char *const operands[])
{
    static const char *const SHELLS[] = {"bash"};
    (void)command;
    (void)given;
    if (strcmp(operands[0], SHELLS[0]) == 0) {
        put_bash();
        return EXIT_KEPT;
    }
    const char *near = sct_nearest(SHELLS, 1, operands[0]);
    if (near != NULL)
        cli_say("error", "no completion for \"%.200s\"; did you mean \"%s\"?", operands[0], near);
    else
        cli_say("error", "no completion for \"%.200s\"; there is one for bash", operands[0]);
    return EXIT_USAGE;
}

const cli_command CLI_COMPLETION = {
    .name = "completion",
    .operands = "SHELL",
    .n_operands = 1,
    .purpose = "Prints the completion script of a shell: bash.",
    .examples = "  scantling completion bash",
    .more = "In a session: source <(scantling completion bash). make install puts the script where bash finds it.",
    .run = run_completion,
};
