/* What the commands share. */
#define _POSIX_C_SOURCE 200809L
#include "cli/run.h"

#include <errno.h>
#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

#include "cli/exits.h"
#include "cli/messages.h"

/* The files of a folder of outputs; the model is the last. */
static const struct {
    const char *name;
    sct_format format;
} OUTPUTS[] = {
    {"result.json", SCT_RESULT_JSON},
    {"schedule.csv", SCT_SCHEDULE_CSV},
    {"drawing.svg", SCT_DRAWING_SVG},
    {"model.json", SCT_MODEL_JSON},
};
enum { N_OUTPUTS = sizeof OUTPUTS / sizeof OUTPUTS[0] };

int cli_exit_of_status(sct_status status)
{
    switch (status) {
    case SCT_OK: return EXIT_KEPT;
    case SCT_BAD_INPUT:
    case SCT_CANNOT_READ: return EXIT_INPUT;
    case SCT_MECHANISM:
    case SCT_NOT_ACCURATE: return EXIT_NO_ANALYSIS;
    case SCT_CANNOT_WRITE: return EXIT_OUTPUT;
    case SCT_NO_MEMORY:
    case SCT_TOO_LARGE: return EXIT_RESOURCES;
    default: return EXIT_SELF_CHECK;
    }
}

int cli_exit_of_result(const sct_result *result)
{
    if (result->outcome == SCT_STALLED && result->kept) return EXIT_NO_PROOF;
    return result->kept ? EXIT_KEPT : EXIT_NOT_KEPT;
}

void cli_put(const char *text)
{
    fputs(text, stdout);
}

static char *path_in(const char *folder, const char *name)
{
    const size_t room = strlen(folder) + strlen(name) + 2;
    char *path = malloc(room);
    if (path != NULL) snprintf(path, room, "%s/%s", folder, name);
    return path;
}

/* The folder is made, and what stands in the way is told, before the long work starts. */
static int prepare_folder(cli_run *run)
{
    struct stat about;
    run->made_folder = mkdir(run->folder, 0777) == 0;
    if (!run->made_folder && errno != EEXIST) {
        cli_say("error", "the folder %s cannot be made: %s", run->folder, strerror(errno));
        return EXIT_OUTPUT;
    }
    if (stat(run->folder, &about) != 0 || !S_ISDIR(about.st_mode)) {
        cli_say("error", "%s is not a folder; -o takes the folder of the outputs", run->folder);
        return EXIT_OUTPUT;
    }
    if (access(run->folder, W_OK | X_OK) != 0) {
        cli_say("error", "the folder %s cannot be written to: %s", run->folder, strerror(errno));
        return EXIT_OUTPUT;
    }
    for (int k = 0; k < N_OUTPUTS && !run->force; k++) {
        char *path = path_in(run->folder, OUTPUTS[k].name);
        if (path == NULL) return EXIT_RESOURCES;
        const bool exists = lstat(path, &about) == 0;
        if (exists) cli_say("error", "%s exists already; --force replaces it", path);
        free(path);
        if (exists) return EXIT_OUTPUT;
    }
    return 0;
}

/* ---- what the drawing shows ----------------------------------------------------------------------------------------
 */

static const char *const DRAWN[] = {"draw-loads", "draw-deflected", "draw-moment", "draw-shear", "draw-axial"};
enum { N_DRAWN = sizeof DRAWN / sizeof DRAWN[0], FIRST_DIAGRAM = 2 };
static const char ENVELOPE[] = "envelope";

/* The options that draw something are sound: *name is the combination that the drawing shows, NULL when none is named.
 * Diagrams may show the envelope instead, whatever the others name. */
static int read_drawn(const cli_run *run, const char **name)
{
    int first = -1;
    *name = NULL;
    for (int i = 0; i < N_DRAWN; i++) {
        const char *given = cli_given(run->command, run->given, DRAWN[i]);
        if (given == NULL) continue;
        if (run->folder == NULL) {
            cli_say("error", "--%s needs -o: the drawing goes into that folder", DRAWN[i]);
            return EXIT_USAGE;
        }
        if (i >= FIRST_DIAGRAM && strcmp(given, ENVELOPE) == 0) continue;
        if (*name != NULL && strcmp(*name, given) != 0) {
            cli_say("error", "--%s and --%s name different combinations; a drawing shows one", DRAWN[first], DRAWN[i]);
            return EXIT_USAGE;
        }
        if (*name == NULL) first = i;
        *name = given;
    }
    return 0;
}

static sct_diagram diagram(const cli_run *run, const char *option)
{
    const char *given = cli_given(run->command, run->given, option);
    if (given == NULL) return SCT_NO_DIAGRAM;
    return strcmp(given, ENVELOPE) == 0 ? SCT_DIAGRAM_ENVELOPE : SCT_DIAGRAM_OF_COMBINATION;
}

/* Before the long work starts. */
static int find_drawn(cli_run *run, const char *name)
{
    const char *near = NULL;
    run->write.draw_loads = cli_given(run->command, run->given, "draw-loads") != NULL;
    run->write.draw_deflected = cli_given(run->command, run->given, "draw-deflected") != NULL;
    run->write.draw_moment = diagram(run, "draw-moment");
    run->write.draw_shear = diagram(run, "draw-shear");
    run->write.draw_axial = diagram(run, "draw-axial");
    if (name == NULL) return 0;
    run->write.combination = sct_model_combination(run->model, name, &near);
    if (run->write.combination >= 0) return 0;
    if (near != NULL)
        cli_say("error", "no combination \"%s\"; did you mean \"%s\"?", name, near);
    else
        cli_say("error", "no combination \"%s\" in the model", name);
    return EXIT_USAGE;
}

int cli_run_open(cli_run *run, const cli_command *command, const char *const given[], const char *path)
{
    *run = (cli_run){.command = command, .given = given, .write = sct_write_defaults()};
    run->quiet = cli_given(command, given, "quiet") != NULL;
    run->json = cli_given(command, given, "json") != NULL;
    run->force = cli_given(command, given, "force") != NULL;
    run->folder = cli_given(command, given, "output");
    if (!cli_word(command, given, "color", &run->colour)) return EXIT_USAGE;
    if (run->folder != NULL && run->folder[0] == '\0') {
        cli_say("error", "-o needs the name of a folder");
        return EXIT_USAGE;
    }
    const char *drawn;
    if (read_drawn(run, &drawn) != 0) return EXIT_USAGE;
    if (strcmp(path, "-") == 0 && isatty(STDIN_FILENO)) {
        cli_say("error", "standard input is a terminal; pipe a model in, or name a file");
        return EXIT_USAGE;
    }
    const int fault = run->folder != NULL ? prepare_folder(run) : 0;
    if (fault != 0) return fault;
    run->issues = sct_issues_new();
    if (run->issues == NULL) return EXIT_RESOURCES;
    const int code = cli_exit_of_status(sct_model_read(path, &run->model, run->issues));
    return code == 0 ? find_drawn(run, drawn) : code;
}

/* The model with the sizes put in is read back from its text, and all that the reports say is checked against a second
 * analysis of it. Without sizes to put in, the model itself is analysed a second time. */
static int self_check(const cli_run *run, bool with_model)
{
    char *text = NULL;
    size_t size = 0;
    sct_model *model = NULL;
    sct_issues *issues = sct_issues_new();
    if (issues == NULL) return EXIT_RESOURCES;
    sct_status status = SCT_OK;
    if (with_model) status = sct_write(run->result, SCT_MODEL_JSON, NULL, &text, &size);
    if (status == SCT_OK && with_model) {
        status = sct_model_parse("model.json", text, size, &model, issues);
        if (status == SCT_BAD_INPUT) cli_say("error", "internal check failed: the sized model cannot be read back");
    }
    const bool was_read = status == SCT_OK;
    if (was_read) status = sct_verify(with_model ? model : run->model, run->result, issues);
    if (status != SCT_OK) cli_issues(issues, true);
    sct_model_free(model);
    sct_issues_free(issues);
    free(text);
    return was_read || status != SCT_BAD_INPUT ? cli_exit_of_status(status) : EXIT_SELF_CHECK;
}

/* The signals that end a program wait while files are put in place: a set is whole, and no part of a file stays. */
static sct_status save_undisturbed(const cli_run *run, const sct_file files[], int n)
{
    sigset_t ending, before;
    sigemptyset(&ending);
    sigaddset(&ending, SIGHUP);
    sigaddset(&ending, SIGINT);
    sigaddset(&ending, SIGTERM);
    sigprocmask(SIG_BLOCK, &ending, &before);
    const sct_status status = sct_save_set(files, n, run->force, run->issues);
    sigprocmask(SIG_SETMASK, &before, NULL);
    return status;
}

static int write_folder(cli_run *run, bool with_model)
{
    sct_file files[N_OUTPUTS];
    char *texts[N_OUTPUTS] = {NULL}, *paths[N_OUTPUTS] = {NULL};
    int n = 0, code = 0;
    for (; n < N_OUTPUTS && code == 0; n++) {
        if (OUTPUTS[n].format == SCT_MODEL_JSON && !with_model) break;
        size_t size = 0;
        paths[n] = path_in(run->folder, OUTPUTS[n].name);
        if (paths[n] == NULL)
            code = EXIT_RESOURCES;
        else
            code = cli_exit_of_status(sct_write(run->result, OUTPUTS[n].format, &run->write, &texts[n], &size));
        files[n] = (sct_file){paths[n], texts[n], size};
    }
    if (code == 0) code = cli_exit_of_status(save_undisturbed(run, files, n));
    for (int k = 0; k < N_OUTPUTS; k++) {
        free(texts[k]);
        free(paths[k]);
    }
    return code;
}

/* Everything that takes memory comes before the first output. */
int cli_run_report(cli_run *run, bool with_model)
{
    char *text = NULL;
    int code = self_check(run, with_model);
    if (code == 0 && (!run->quiet || run->json)) {
        sct_write_options options = run->write;
        options.colour = cli_colours(STDOUT_FILENO, run->colour);
        code = cli_exit_of_status(
            sct_write(run->result, run->json ? SCT_RESULT_JSON : SCT_SUMMARY, &options, &text, NULL));
    }
    if (code == 0 && run->folder != NULL) code = write_folder(run, with_model);
    if (code == 0 && text != NULL) cli_put(text);
    free(text);
    return code != 0 ? code : cli_exit_of_result(run->result);
}

int cli_run_close(cli_run *run, int code)
{
    if (run->issues != NULL) cli_issues(run->issues, run->quiet);
    if (code == EXIT_RESOURCES && (run->issues == NULL || sct_issues_errors(run->issues) == 0))
        cli_say("error", "%s", sct_status_text(SCT_NO_MEMORY));
    if (run->made_folder) rmdir(run->folder); /* stays unless it is empty */
    sct_result_free(run->result);
    sct_model_free(run->model);
    sct_issues_free(run->issues);
    return code;
}
