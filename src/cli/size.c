/* scantling size: finds the lightest sizes. */
#define _POSIX_C_SOURCE 200809L
#include <math.h>
#include <signal.h>
#include <stdio.h>
#include <string.h>
#include <time.h>
#include <unistd.h>

#include "cli/commands.h"
#include "cli/exits.h"
#include "cli/messages.h"
#include "cli/run.h"

/* The first interrupt asks the search to stop and is remembered; a second one ends the program at once. */
static volatile sig_atomic_t stop_signal;

static void on_signal(int signal_number)
{
    if (stop_signal != 0) _exit(128 + signal_number);
    stop_signal = signal_number;
}

static void catch_signals(void)
{
    struct sigaction action = {.sa_handler = on_signal, .sa_flags = SA_RESTART};
    sigemptyset(&action.sa_mask);
    sigaction(SIGINT, &action, NULL);
    sigaction(SIGTERM, &action, NULL);
}

static const char *const PROGRESS[] = {"auto", "always", "never", "json", NULL};
typedef enum progress_kind { PROGRESS_AUTO, PROGRESS_ALWAYS, PROGRESS_NEVER, PROGRESS_JSON } progress_kind;

typedef struct teller {
    progress_kind kind;
    bool shown;
    double started, next; /* [s] */
} teller;

static double now(void)
{
    struct timespec t;
    clock_gettime(CLOCK_MONOTONIC, &t);
    return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

/* "descent, start 3 of 8, 412 analyses (105 a second), best so far 830 kg, about 4 s more". The end is guessed from
 * the starts that are done. */
static void tell_person(const sct_progress *p, double elapsed)
{
    fprintf(stderr, "\r%s, start %d of %d, %d analyses (%.0f a second)", p->stage, p->start, p->n_starts, p->analyses,
            p->analyses / elapsed);
    if (isfinite(p->best)) fprintf(stderr, ", best so far %.0f kg", p->best);
    if (p->start > 1 && strcmp(p->stage, "descent") == 0)
        fprintf(stderr, ", about %.0f s more", elapsed * (p->n_starts - p->start + 1) / (p->start - 1));
    fprintf(stderr, "\033[K");
}

static void tell_number(const char *name, double value)
{
    if (isfinite(value))
        fprintf(stderr, ",\"%s\":%.6g", name, value);
    else
        fprintf(stderr, ",\"%s\":null", name);
}

/* One object a line. */
static void tell_program(const sct_progress *p, double elapsed)
{
    fprintf(stderr, "{\"stage\":\"%s\",\"start\":%d,\"starts\":%d,\"analyses\":%d", p->stage, p->start, p->n_starts,
            p->analyses);
    tell_number("mass_kg", p->mass);
    tell_number("violation", p->violation);
    tell_number("best_kg", p->best);
    tell_number("elapsed_s", elapsed);
    fprintf(stderr, "}\n");
}

/* Progress on standard error, at most five times a second: for a program from the start, for a person after half a
 * second, so that short runs stay silent. */
static bool observe(const sct_progress *p, void *user)
{
    static const double FIRST = 0.5, BETWEEN = 0.2; /* [s] */
    teller *t = user;
    const double elapsed = now() - t->started, first = t->kind == PROGRESS_JSON ? 0.0 : FIRST;
    if (t->kind == PROGRESS_NEVER || elapsed < first || elapsed < t->next) return stop_signal == 0;
    t->next = elapsed + BETWEEN;
    if (t->kind == PROGRESS_JSON) {
        tell_program(p, elapsed);
    } else {
        t->shown = true;
        tell_person(p, elapsed);
    }
    return stop_signal == 0;
}

static int read_settings(const cli_command *command, const char *const given[], sct_settings *settings, teller *t)
{
    int kind = PROGRESS_AUTO, seed = (int)settings->seed;
    if (!cli_whole(command, given, "starts", 1, 1000, &settings->starts) ||
        !cli_whole(command, given, "seed", 0, 1000000000, &seed) ||
        !cli_whole(command, given, "iterations", 0, 100000, &settings->iterations) ||
        !cli_number(command, given, "tolerance", &settings->tolerance) || !cli_word(command, given, "progress", &kind))
        return EXIT_USAGE;
    settings->seed = (unsigned)seed;
    settings->plain = cli_given(command, given, "plain") != NULL;
    t->kind = kind == PROGRESS_AUTO && !isatty(STDERR_FILENO) ? PROGRESS_NEVER : (progress_kind)kind;
    const char *fault = sct_settings_fault(settings);
    if (fault != NULL) cli_say("error", "--%s", fault); /* settings are named as their options */
    return fault != NULL ? EXIT_USAGE : 0;
}

static int run_size(const cli_command *command, const char *const given[], char *const operands[])
{
    sct_settings settings = sct_settings_defaults();
    teller t = {.started = now()};
    int code = read_settings(command, given, &settings, &t);
    if (code != 0) return code;
    settings.observer = observe;
    settings.user = &t;
    cli_run run;
    code = cli_run_open(&run, command, given, operands[0]);
    catch_signals(); /* until here nothing is found that could be shown: a signal just ends the program */
    if (code == 0) code = cli_exit_of_status(sct_size(run.model, &settings, &run.result, run.issues));
    if (t.shown) fprintf(stderr, "\r\033[K");
    if (code == 0) code = cli_run_report(&run, true);
    if (stop_signal != 0 && (code == EXIT_KEPT || code == EXIT_NOT_KEPT || code == EXIT_NO_PROOF)) {
        cli_say("note", "interrupted: what is shown is the best found so far");
        code = 128 + (int)stop_signal;
    }
    return cli_run_close(&run, code);
}

const cli_command CLI_SIZE = {
    .name = "size",
    .operands = "MODEL",
    .n_operands = 1,
    .purpose = "Finds the lightest sizes of all groups of MODEL that keep every limit in every combination.",
    .examples = "  scantling size models/demo_roof.json -o build/demo --force\n"
                "  scantling size --json models/benchmarks/10bar_case1.json | jq .mass_kg",
    .more = "MODEL is a model file, or - for standard input. With -o: result.json, schedule.csv, drawing.svg, and\n"
            "model.json with the sizes put in, which is read and checked again before anything is written.\n"
            "Exit code: 0 every limit kept, 1 no feasible design, 2 command line, 3 input, 4 cannot be analysed,\n"
            "5 the search ended before it was done, 6 output, 7 out of memory or too large, 70 internal check,\n"
            "130 interrupted (the best so far is written; a second interrupt writes nothing more).",
    .n_options = CLI_N_OUTPUT_OPTIONS + 6,
    .options = {CLI_OUTPUT_OPTIONS,
                {0, "starts", "N", "starts of the search (default: 8, fewer for large models)", NULL},
                {0, "seed", "N", "of the random starts (default 1)", NULL},
                {0, "iterations", "N", "of each start at most (default 100; 0: check the start design)", NULL},
                {0, "tolerance", "T", "on optimality and limits (default 1e-6)", NULL},
                {0, "plain", NULL, "the published method in plain areas, for comparison (slow)", NULL},
                {0, "progress", "WHEN", "tell how far the search is", PROGRESS}},
    .run = run_size,
};
