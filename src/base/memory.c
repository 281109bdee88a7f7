/* Memory of the machine and the limit of the process. */
#define _DEFAULT_SOURCE /* sysconf's _SC_PHYS_PAGES */
#include "base/memory.h"

#include <math.h>
#include <sys/resource.h>
#include <unistd.h>

double sct_memory_most(void)
{
    const double PART = 0.9; /* the rest is for the system and for what is not estimated */
    const long pages = sysconf(_SC_PHYS_PAGES), page = sysconf(_SC_PAGESIZE);
    double most = pages > 0 && page > 0 ? (double)pages * (double)page : INFINITY;
    struct rlimit limit;
    if (getrlimit(RLIMIT_AS, &limit) == 0 && limit.rlim_cur != RLIM_INFINITY) most = fmin(most, (double)limit.rlim_cur);
    return PART * most;
}
