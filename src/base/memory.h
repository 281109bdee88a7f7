/* How much memory a job may take on this machine. */
#ifndef SCT_BASE_MEMORY_H
#define SCT_BASE_MEMORY_H

/** [bytes] nine tenths of the machine's memory, or of the process's own limit of address space where that is less;
 * INFINITY where the system does not say. */
double sct_memory_most(void);
#endif
