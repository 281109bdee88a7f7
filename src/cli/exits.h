/* Exit codes. */
#ifndef SCT_CLI_EXITS_H
#define SCT_CLI_EXITS_H

#include "scantling.h"

enum {
    EXIT_KEPT = 0,        /* done, every limit kept */
    EXIT_NOT_KEPT = 1,    /* done, some limit not kept or no feasible design */
    EXIT_USAGE = 2,       /* wrong command line */
    EXIT_INPUT = 3,       /* bad input file */
    EXIT_NO_ANALYSIS = 4, /* the structure moves freely or is too ill-conditioned */
    EXIT_NO_PROOF = 5,    /* the search ended before it was done */
    EXIT_OUTPUT = 6,      /* an output was not written */
    EXIT_RESOURCES = 7,   /* out of memory, or above a stated limit */
    EXIT_SELF_CHECK = 70  /* an internal check failed */
    /* 128 + signal: interrupted */
};

int cli_exit_of_status(sct_status status);
int cli_exit_of_result(const sct_result *result);
#endif
