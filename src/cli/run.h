/* What the commands share: reading a model, telling the result, writing the outputs. */
#ifndef SCT_CLI_RUN_H
#define SCT_CLI_RUN_H

#include "cli/options.h"
#include "scantling.h"

/* One run of size or check. */
typedef struct cli_run {
    const cli_command *command;
    const char *const *given;
    bool quiet, json, force;
    int colour;         /* 0 auto, 1 always, 2 never */
    const char *folder; /* of the outputs; NULL: none */
    bool made_folder;
    sct_write_options write;
    sct_issues *issues;
    sct_model *model;
    sct_result *result;
} cli_run;

/** Options that every job has; 0 or an exit code. */
int cli_run_open(cli_run *run, const cli_command *command, const char *const given[], const char *path);

/** Summary or JSON on standard output, files into the folder; the exit code. with_model: also model.json. */
int cli_run_report(cli_run *run, bool with_model);

/** Issues on standard error, memory given back, standard output flushed and checked; the final exit code. */
int cli_run_close(cli_run *run, int code);

/** Text on standard output. */
void cli_put(const char *text);
#endif
