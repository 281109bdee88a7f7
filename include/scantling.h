/**
 * scantling: sizes the members of roof trusses and small frames.
 *
 * This header is the library's manual. A program that sizes a truss reads
 *
 *     sct_issues *issues = sct_issues_new();
 *     sct_model  *model  = NULL;
 *     sct_result *result = NULL;
 *     sct_status  status = sct_model_read("truss.json", &model, issues);
 *     if (status == SCT_OK) status = sct_size(model, NULL, &result, issues);
 *     if (status == SCT_OK) printf("%.1f kg\n", result->mass);
 *     sct_result_free(result);
 *     sct_model_free(model);
 *     sct_issues_free(issues);
 *
 * (examples/size_a_truss.c is the same with every error handled.)
 *
 * Conventions
 *   Units      SI everywhere: metre, newton, pascal, kilogram, kelvin. Files carry their own units; they are
 *              converted by the reader and by the writers, nowhere else.
 *   Signs      Tension is positive. Displacements, loads and reactions are components along x, y, z of the model.
 *              In a plane model y is up and z components are 0; in a space model z is up. Gravity acts downwards.
 *   Axes       Axis 0 is "in_plane", axis 1 is "out_of_plane": the bending of a member in, and out of, the plane of
 *              its truss.
 *   Ownership  Who calls a ..._new, ..._read, ..._parse, sct_check or sct_size frees what it got. Every free accepts
 *              NULL. A `const char *` inside an object lives as long as the object. A result borrows its model: free
 *              the model after the result.
 *   Errors     Functions return an sct_status. What a person must know about it is in the sct_issues that was handed
 *              in: file, line, column, pointer and words. The library never prints and never ends the process.
 *   Threads    No global state: different objects may be used from different threads at once.
 *
 * Every result is preliminary: SCT_CAUTION goes into every output.
 */
#ifndef SCANTLING_H
#define SCANTLING_H

#include <stdbool.h>
#include <stddef.h>

#ifdef __cplusplus
extern "C" {
#endif

#if defined(__GNUC__)
#define SCT_API __attribute__((visibility("default")))
#else
#define SCT_API
#endif

#define SCT_VERSION "0.1.0"
#define SCT_MODEL_FORMAT 1 /* the model files that this version reads and writes: "scantling": 1 */
/* A limit is kept when value / limit, with the error of the analysis, is at most 1 to nine digits: sums that are equal
 * on paper differ in the sixteenth. */
#define SCT_KEPT_TO 1e-9
#define SCT_RESULT_FORMAT 1      /* result.json: "format": "scantling result", "version": 1 */
#define SCT_EXPLANATION_FORMAT 1 /* sct_explain_json: "format": "scantling explanation", "version": 1 */

/* The one caution text; it stands in every output. */
#define SCT_CAUTION                                                                                                    \
    "Preliminary sizing only. A licensed engineer must review it; local codes govern. Connections are not covered."

/* ---- status ------------------------------------------------------------------------------------------------ */

#define SCT_STATUS_LIST(X)                                                                                             \
    X(SCT_OK, "ok")                                                                                                    \
    X(SCT_BAD_INPUT, "the input has errors")                                                                           \
    X(SCT_CANNOT_READ, "the input cannot be read")                                                                     \
    X(SCT_MECHANISM, "the structure can move without resistance")                                                      \
    X(SCT_NOT_ACCURATE, "the structure is too ill-conditioned for a trustworthy answer")                               \
    X(SCT_CANNOT_WRITE, "the output cannot be written")                                                                \
    X(SCT_NO_MEMORY, "out of memory")                                                                                  \
    X(SCT_TOO_LARGE, "the input is above a stated limit")                                                              \
    X(SCT_SELF_CHECK, "an internal check failed")                                                                      \
    X(SCT_INTERRUPTED, "interrupted")                                                                                  \
    X(SCT_INFEASIBLE, "no point keeps every constraint")                                                               \
    X(SCT_NOT_CONVEX, "the matrix is not positive definite")                                                           \
    X(SCT_NOT_CONVERGED, "stopped by a limit before it converged")

#define SCT_STATUS_NAME(name, text) name,
typedef enum sct_status { SCT_STATUS_LIST(SCT_STATUS_NAME) SCT_STATUS_COUNT } sct_status;
#undef SCT_STATUS_NAME

/** The words of a status; never NULL. */
SCT_API const char *sct_status_text(sct_status status);

/** The version of the linked library, as SCT_VERSION. */
SCT_API const char *sct_version(void);

/* ---- issues: what a person must know, and where ------------------------------------------------------------- */

typedef enum sct_severity { SCT_NOTE, SCT_WARNING, SCT_ERROR } sct_severity;

/* One message. `line` and `column` count from 1 (the column counts characters); 0: no place. `pointer` is the JSON
 * pointer of the value (RFC 6901), "" for the whole document, NULL where none applies. */
typedef struct sct_issue {
    sct_severity severity;
    const char *file;
    int line, column;
    const char *pointer;
    const char *message;
} sct_issue;

typedef struct sct_issues sct_issues;

/** An empty list; NULL when out of memory. */
SCT_API sct_issues *sct_issues_new(void);
SCT_API void sct_issues_free(sct_issues *issues);

/** How many messages are kept (at most 20 errors; the rest is only counted, see sct_issues_errors). */
SCT_API int sct_issues_count(const sct_issues *issues);
/** How many errors were found, kept or not. */
SCT_API int sct_issues_errors(const sct_issues *issues);
/** Message i, 0 <= i < count, in the order they were found; owned by the list. */
SCT_API const sct_issue *sct_issues_get(const sct_issues *issues, int i);

/** `FILE:LINE:COL: error: POINTER: message` (parts without value left out) as a new string for free(); NULL when out
 * of memory. Control characters are shown as \xNN. */
SCT_API char *sct_issue_line(const sct_issue *issue);

/** The word of a list (n strings, NULL entries are passed over) nearest to `word` by edits (insert, delete, replace,
 * swap of neighbours), when it is near enough to be a slip: at most 2 edits and a third of its length, but 1 is always
 * allowed; else NULL. Ties: the one that begins most like it, then the first. */
SCT_API const char *sct_nearest(const char *const words[], int n, const char *word);

/* ---- model ---------------------------------------------------------------------------------------------------- */

typedef struct sct_model sct_model;

/**
 * Reads a model file (format 1: models/model.schema.json describes it; README.md shows one).
 *
 * path    file to read, or "-" for standard input
 * model   out: the model; NULL unless SCT_OK
 * issues  gains every error and warning with its place
 *
 * SCT_CANNOT_READ, SCT_BAD_INPUT, SCT_TOO_LARGE, SCT_NO_MEMORY.
 */
SCT_API sct_status sct_model_read(const char *path, sct_model **model, sct_issues *issues);

/** The same from `size` bytes in memory; `name` stands for the file in messages. The bytes need no final zero. */
SCT_API sct_status sct_model_parse(const char *name, const char *bytes, size_t size, sct_model **model,
                                   sct_issues *issues);
SCT_API void sct_model_free(sct_model *model);

/** The number of a combination of the model by its name, as sct_write_options take it; -1 when there is none: then
 * *nearest is the name that was probably meant, or NULL. */
SCT_API int sct_model_combination(const sct_model *model, const char *name, const char **nearest);

/* ---- settings --------------------------------------------------------------------------------------------------- */

/* One step of the search, told to an observer. */
typedef struct sct_progress {
    const char *stage;   /* "descent" or "sections" */
    int start, n_starts; /* which start of how many, from 1 */
    int analyses;        /* so far, all starts */
    double mass;         /* [kg] of the current design */
    double violation;    /* largest ln(value/limit), 0 when every limit is kept */
    double best;         /* [kg] best design so far that keeps every limit; NAN when none yet */
} sct_progress;

/* Called after each step; return false to stop the search (the best design so far is kept and marked interrupted). */
typedef bool sct_observer(const sct_progress *progress, void *user);

typedef enum sct_engine { SCT_ENGINE_AUTO, SCT_ENGINE_SMALL, SCT_ENGINE_SPARSE } sct_engine;

typedef struct sct_settings {
    int starts;             /* seeded starts of the descent; 0 (default): 8 where cheap, fewer for large models; >= 0 */
    unsigned seed;          /* of the random starts; default 1 */
    int iterations;         /* of each start, default 100; 0: the start design is checked and marked not optimised */
    double tolerance;       /* on the KKT residual and on ln(value/limit); default 1e-6; > 0 and <= 1e-2 */
    bool plain;             /* the published constrained steepest descent in areas, for comparison; default false */
    sct_engine engine;      /* default SCT_ENGINE_AUTO */
    sct_observer *observer; /* default NULL */
    void *user;
} sct_settings;

SCT_API sct_settings sct_settings_defaults(void);
/** NULL when all is sound, else what is wrong, in words. */
SCT_API const char *sct_settings_fault(const sct_settings *settings);

/* ---- result ----------------------------------------------------------------------------------------------------- */

/* How a run ended. */
#define SCT_OUTCOME_LIST(X)                                                                                            \
    X(SCT_CHECKED, "checked")               /* given sections were checked; `kept` tells the verdict */                \
    X(SCT_OPTIMUM, "optimum")               /* a local optimum: KKT residual and violation within the tolerance */     \
    X(SCT_SECTIONS_FOUND, "sections")       /* sections picked from the ladders; every limit kept */                   \
    X(SCT_NO_FEASIBLE_DESIGN, "infeasible") /* no design found that keeps every limit; the least violation is shown */ \
    X(SCT_STALLED, "stalled")               /* the search ended before its tolerance; the best design is shown */      \
    X(SCT_NOT_OPTIMISED, "not optimised")   /* the start design, checked */                                            \
    X(SCT_STOPPED, "interrupted")           /* stopped by the observer; the best design so far is shown */
#define SCT_OUTCOME_NAME(name, text) name,
typedef enum sct_outcome { SCT_OUTCOME_LIST(SCT_OUTCOME_NAME) SCT_OUTCOME_COUNT } sct_outcome;
#undef SCT_OUTCOME_NAME
SCT_API const char *sct_outcome_text(sct_outcome outcome);

#define SCT_CHECK_LIST(X)                                                                                              \
    X(SCT_CHECK_NONE, "no force")                                                                                      \
    X(SCT_CHECK_TENSION, "tension")                                                                                    \
    X(SCT_CHECK_COMPRESSION, "compression")                                                                            \
    X(SCT_CHECK_BUCKLING_IN, "buckling in plane")                                                                      \
    X(SCT_CHECK_BUCKLING_OUT, "buckling out of plane")                                                                 \
    X(SCT_CHECK_SLENDERNESS, "slenderness")                                                                            \
    X(SCT_CHECK_DEFLECTION, "deflection")                                                                              \
    X(SCT_CHECK_BENT_TENSION, "tension with bending")                                                                  \
    X(SCT_CHECK_BENT_COMPRESSION, "compression with bending")                                                          \
    X(SCT_CHECK_BENT_BUCKLING, "buckling with bending")                                                                \
    X(SCT_CHECK_BOW, "bow")                                                                                            \
    X(SCT_CHECK_CRITICAL, "critical load")                                                                             \
    X(SCT_CHECK_FREQUENCY, "frequency")                                                                                \
    X(SCT_CHECK_SMALLEST, "smallest size")                                                                             \
    X(SCT_CHECK_LARGEST, "largest size")
#define SCT_CHECK_NAME(name, text) name,
typedef enum sct_check_kind { SCT_CHECK_LIST(SCT_CHECK_NAME) SCT_CHECK_COUNT } sct_check_kind;
#undef SCT_CHECK_NAME
SCT_API const char *sct_check_text(sct_check_kind kind);

/* A group with the size it got. */
typedef struct sct_group_result {
    const char *name, *material;
    const char *section; /* name of its section; NULL for a free area */
    bool is_held;        /* the model gave the size */
    int n_members;
    double A;            /* [m2] */
    double I[2];         /* [m4] about the axis of in-plane and of out-of-plane bending; NAN when not stated */
    double depth;        /* [m] for drawing; from I and A where the section does not say; 0 when unknown */
    double length;       /* [m] of all its members */
    double unit_mass;    /* [kg/m] */
    double mass;         /* [kg] */
    double A_continuous; /* [m2] where the descent ended, before sections were picked; NAN without a descent */
    int worst_member;    /* member of the largest utilisation */
    double W[2], J;      /* [m3], [m4]; NAN when not stated */
} sct_group_result;

typedef struct sct_member_result {
    const char *name;
    int group, from, to;    /* indices */
    double L;               /* [m] between joints */
    double Lcr[2];          /* [m] effective lengths */
    double lambda[2];       /* Lcr/i; NAN when i is not stated */
    double mass;            /* [kg] */
    sct_check_kind check;   /* the governing check; SCT_CHECK_NONE when no check applies */
    int combination;        /* it governs in this one; -1 when it holds in all (slenderness) or none applies */
    double N;               /* [N] force there */
    double utilisation;     /* largest value/limit */
    double N_max, N_min;    /* [N] over all combinations */
    int N_max_in, N_min_in; /* their combinations */
    bool compressed;        /* in compression in some combination in which strength is checked */
    /* members that carry moments: beams, and bars loaded between their joints */
    bool is_bent;
    double x;            /* [m] from its start, where the governing check holds */
    double M[2];         /* [N m] there: bending in plane, out of plane */
    double M_most[2];    /* [N m] of largest size over all combinations and along the member */
    double M_most_at[2]; /* [m] */
    int M_most_in[2];    /* their combinations */
    double bow[2];       /* [m] largest distance from its chord over all combinations, along local axes 1, 2 */
    int bow_in[2];       /* their combinations */
    double axes[3][3];   /* local axes: along, bending in plane, out of plane */
    bool hinged[2][3];   /* ends: bending in plane, out of plane, twist; true: pinned */
    bool sprung[2][3];   /* ends held by springs */
    /* What the lowest buckling mode of all combinations says of it, per plane of bending: its part of the energy of
     * bending, and the effective length pi sqrt(E I / (alpha |N|)) that this implies. The length means something only
     * for members that take part (a twentieth and more); NAN: not compressed there, or a bar. */
    double mode_share[2], mode_Lcr[2];
} sct_member_result;

/* The inside of a member at one place, in its local axes. M > 0 in plane bends it towards +axis 1 (tension on the side
 * of -axis 1), out of plane towards +axis 2; V = dM/dx. */
typedef struct sct_station {
    double x;                /* [m] from its start */
    double N, V[2], M[2], T; /* [N], [N m] */
    double bow[2];           /* [m] from its chord, along local axes 1 and 2 */
    double d[3];             /* [m] displacement, in the model's axes */
} sct_station;

typedef struct sct_joint_result {
    const char *name;
    double at[3];      /* [m] */
    int n_held;        /* number of directions held */
    double held[3][3]; /* the directions, unit vectors as given */
} sct_joint_result;

/* One deflection limit at one joint: its worst combination. */
typedef struct sct_deflection_result {
    int limit; /* index in the model's list */
    int joint, combination;
    double direction[3];
    double u;       /* [m] along the direction */
    double at_most; /* [m] */
    double utilisation;
    const char *label; /* "L/300" or "20 mm", as written */
    int from;          /* relative to this joint; -1: absolute */
} sct_deflection_result;

/* One limit on the bow of one member: its worst combination. A piece of a run counts against the run's chord where the
 * limit names the run. */
typedef struct sct_bow_result {
    int limit; /* index in the model's list */
    int member, combination;
    int axis;       /* 0 in plane, 1 out of plane */
    double x;       /* [m] from the member's start */
    double v;       /* [m] along the local axis */
    double at_most; /* [m] */
    double utilisation;
    const char *label; /* "L/300" or "20 mm", as written */
    const char *run;   /* its name, or NULL */
} sct_bow_result;

/* Elastic critical load factors of one combination in which strength is checked: its loads times the factor would make
 * the structure buckle. Beams divided into eight pieces; torsional and local buckling and that of pin-ended members
 * between their joints are not in it. */
typedef struct sct_critical_result {
    int combination;
    double factor;        /* the lowest; INFINITY: nothing buckles */
    double error;         /* an exact one (of the divided structure) lies within factor / (1 -+ error) */
    bool is_proven;       /* no lower one exists */
    double sway;          /* of the lowest mode in which joints sway */
    bool is_sway_bound;   /* it lies above that */
    double amplification; /* of moments in the checks: 1/(1 - 1/sway) where the model asks for it, else 1 */
    bool has_verdict;     /* false: first-order results say too little, or the structure buckles */
    const char *words;    /* what the factor says about first-order results */
} sct_critical_result;

/* The price of a limit that holds the mass up, at the continuous optimum: what the next small relief would save. */
typedef struct sct_price {
    sct_check_kind kind;
    int group;         /* of the members concerned, or of the size bound; -1 for a deflection limit */
    int limit;         /* deflection limit, or -1 */
    double multiplier; /* [kg] per unit of ln(limit): sum over all constraints that this limit generates */
    double per_unit;   /* [kg] per SI unit of the limit (deflection: per metre; size bound: per m2); NAN when a ratio */
    double saving;     /* [kg] for the relief in the words; the dearest comes first */
    char words[640];   /* "1 mm more deflection (L/300 in y at L4) saves 3.1 kg" */
} sct_price;

/* Where one start of the descent ended. */
typedef struct sct_start_result {
    double mass, violation, kkt; /* [kg], ln, relative */
    int analyses, iterations;
    sct_outcome outcome;
} sct_start_result;

/* How far an analysis can be trusted. */
typedef struct sct_accuracy {
    double equilibrium; /* largest joint imbalance / largest force at a joint */
    double error;       /* estimate of the relative error of displacements and forces: size of the last refinement */
    double bound; /* proven upper bound of that error, rounding of the proof included. Relative to each value, or to
                   * 1e-3 of the largest of its kind where the value is smaller. It covers the analysis of the structure
                   * as numbered: not the model, the loads or the theory. */
} sct_accuracy;

typedef struct sct_result {
    const sct_model *model; /* borrowed */
    sct_outcome outcome;
    bool kept;             /* every limit is kept by the design shown */
    sct_settings settings; /* that it was made with */
    bool us_customary;     /* writers show kip, ft, in, ksi, lb instead of kN, m, mm, MPa, kg */
    const char *title;     /* "" when none */
    int dimensions;        /* 2 or 3 */

    int n_joints, n_members, n_groups, n_combinations, n_cases;
    sct_joint_result *joints;
    sct_member_result *members;
    sct_group_result *groups;
    const char **combinations; /* their names */
    bool *is_for_strength;     /* n_combinations: strength is checked in it; else deflections only */
    double *u;                 /* [m]  n_combinations x n_joints x 3 displacements */
    double *reaction;          /* [N]  n_combinations x n_joints x 3; 0 where nothing is held */
    double *N;    /* [N]  n_combinations x n_members; what is below 1e-9 of the largest force is given as 0 */
    bool *slack;  /* n_combinations x n_members: carries tension only and is slack; NULL where no member carries
                   * tension only */
    double *load; /* [N]  n_combinations x n_joints x 3, self-weight included; loads on members count at their ends */
    /* frames, each n_combinations x n_joints x 3, about x, y, z */
    double *turn;        /* [rad] rotations; 0 where no member's end takes part */
    double *moment;      /* [N m] that supports give */
    double *moment_load; /* [N m] as `load` */
    bool has_bent;       /* some member carries moments */
    double *ends; /* n_combinations x n_members x 2 x 6: N, V in plane, V out of plane, M in plane, M out of plane, T
                   * just inside both ends of a member */
    int n_bows;
    sct_bow_result *bows;
    int n_criticals; /* 0: pin-ended members only, and no limit on it */
    sct_critical_result *criticals;
    int lowest_critical;               /* index of the lowest of them, which mode_share is of; -1: nothing buckles */
    double least_factor;               /* that the model asks for; NAN: none */
    double frequency, least_frequency; /* [Hz] lowest natural one; NAN: no limit */
    double vibrating_mass;             /* [kg] that it was found with */

    int n_deflections;
    sct_deflection_result *deflections;

    double mass;                /* [kg] of the design shown */
    double mass_continuous;     /* [kg] where the descent ended (NAN without): no bound, see README.md */
    double utilisation;         /* largest of all checks */
    double utilisation_at_most; /* the same with every force and displacement moved to its unsafe side by its proven
                                 * error bound; `kept`: at most 1 */
    double kkt, violation;      /* at the continuous optimum: relative residual, largest ln(value/limit); NAN without */
    int analyses;               /* factorizations in all */
    int n_starts;
    sct_start_result *starts;
    int best_start;
    int n_prices;
    sct_price *prices;
    sct_accuracy accuracy; /* of the analysis shown */
    int n_warnings;
    const char *
        *warnings;      /* those in `issues` when the result was made (hand in the list that the model was read with) */
    char verdict[1000]; /* the finding in one sentence; for an infeasible model the limit and by how much */
} sct_result;

/**
 * Analyses the model with the sections and areas that it gives and checks every limit.
 *
 * Every group must be held ("section" or an "area" that is a number). `settings` may be NULL for the defaults.
 * SCT_OK also when limits are not kept: read result->kept. Otherwise *result is NULL and issues say why:
 * SCT_BAD_INPUT, SCT_MECHANISM, SCT_NOT_ACCURATE, SCT_TOO_LARGE, SCT_NO_MEMORY, SCT_SELF_CHECK.
 */
SCT_API sct_status sct_check(const sct_model *model, const sct_settings *settings, sct_result **result,
                             sct_issues *issues);

/**
 * Finds the lightest sizes of all groups that are not held: constrained steepest descent over continuous areas, then
 * sections from the ladders. The design shown is analysed and checked afresh with its true properties.
 *
 * SCT_OK also when no feasible design exists: read result->outcome and result->kept. Errors as sct_check.
 */
SCT_API sct_status sct_size(const sct_model *model, const sct_settings *settings, sct_result **result,
                            sct_issues *issues);
/**
 * The diagrams of a member in a combination: its ends, every place where a load begins, ends or acts (both sides of a
 * jump), every extreme of M, V and the bow, and `between` places evenly between neighbours; in order of x. For free().
 *
 * SCT_OK, SCT_NO_MEMORY.
 */
SCT_API sct_status sct_result_stations(const sct_result *result, int combination, int member, int between,
                                       sct_station **stations, int *n);

SCT_API void sct_result_free(sct_result *result);

/**
 * Checks a finished result against a second analysis by separate code: other unknowns, another matrix and solver,
 * formulas written a second time. Every size, mass, load, force, displacement, reaction, utilisation and the verdict
 * are compared.
 *
 * sized   the model with the sizes put in, read back from what SCT_MODEL_JSON wrote (for a result of sct_check: its
 * model) issues  gains an error with both numbers for each that differs by more than rounding and the error bounds
 * explain (1e-7 relative where the analysis is accurate)
 *
 * SCT_OK: all agree. SCT_SELF_CHECK: some do not, or `sized` is another model. SCT_NO_MEMORY, SCT_TOO_LARGE.
 */
SCT_API sct_status sct_verify(const sct_model *sized, const sct_result *result, sct_issues *issues);

/* ---- writers ---------------------------------------------------------------------------------------------------- */

typedef enum sct_format {
    SCT_SUMMARY,      /* plain text for a terminal */
    SCT_RESULT_JSON,  /* everything, SI, full precision */
    SCT_SCHEDULE_CSV, /* the member schedule */
    SCT_MODEL_JSON,   /* the model with the sizes put in: input for sct_check */
    SCT_DRAWING_SVG   /* the truss with marks and utilisations */
} sct_format;

/* Diagrams along the members in a drawing, below the figure of the utilisations. */
typedef enum sct_diagram {
    SCT_NO_DIAGRAM,
    SCT_DIAGRAM_OF_COMBINATION, /* of the combination that the drawing shows */
    SCT_DIAGRAM_ENVELOPE        /* largest and smallest over all combinations that strength is checked in */
} sct_diagram;

typedef struct sct_write_options {
    bool colour;         /* summary: terminal colours */
    int combination;     /* drawing: loads and deflected shape of this one; default -1: the worst for deflection */
    bool draw_loads;     /* drawing: the loads of the combination */
    bool draw_deflected; /* drawing: the deflected shape of the combination */
    sct_diagram draw_moment, draw_shear, draw_axial; /* drawing: bending moments, shear forces, axial forces */
} sct_write_options;
SCT_API sct_write_options sct_write_defaults(void);

/**
 * Writes a finished result as text: the same result gives the same bytes.
 *
 * options may be NULL. *text is a new zero-terminated string for free(), *size its length (NULL: not wanted).
 * SCT_NO_MEMORY.
 */
SCT_API sct_status sct_write(const sct_result *result, sct_format format, const sct_write_options *options, char **text,
                             size_t *size);

/** One member's checks with the numbers put in, every combination; `member` is its name. SCT_BAD_INPUT: no such
 * member (issues name the nearest). */
SCT_API sct_status sct_explain(const sct_result *result, const char *member, char **text, sct_issues *issues);

/** The same as JSON, SI and full precision: "format": "scantling explanation". Within a version keys are only added. */
SCT_API sct_status sct_explain_json(const sct_result *result, const char *member, char **text, sct_issues *issues);

/* A file to be saved: `size` bytes of text. */
typedef struct sct_file {
    const char *path, *text;
    size_t size;
} sct_file;

/**
 * Saves n files that belong together, all or none: every one is written beside its place, flushed and closed; only then
 * they are put in place. When one cannot be, those before it are taken away again and what they replaced is put back.
 *
 * force  replace what is there; without it nothing is written when one of the files exists
 *
 * SCT_CANNOT_WRITE with the system's reason in issues, SCT_NO_MEMORY (nothing was written).
 * What stays possible: a process killed, or a machine that loses power, between two of the n last steps leaves whole
 * files, some new and some old, and scantling.*.part and scantling.*.old beside them; on file systems without second
 * names for a file (link) a replaced file cannot be put back, and a warning says so.
 */
SCT_API sct_status sct_save_set(const sct_file files[], int n, bool force, sct_issues *issues);

/** The same for one file: saved whole or not at all. */
SCT_API sct_status sct_save(const char *path, const char *text, size_t size, bool force, sct_issues *issues);

#ifdef __cplusplus
}
#endif
#endif
