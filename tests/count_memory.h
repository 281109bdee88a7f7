/* Requests for memory counted and made to fail, in the test's own process, for the test program that includes this:
 * those of the library under test and, as the definitions are visible, of the shared libraries (glibc; a sanitizer has
 * a malloc of its own: COUNTS_MEMORY is 0). */
#ifndef TESTS_COUNT_MEMORY_H
#define TESTS_COUNT_MEMORY_H

#include "support.h"

#include <stdbool.h>

#if defined(__has_feature) /* clang's way */
#if __has_feature(address_sanitizer) && !defined(__SANITIZE_ADDRESS__)
#define __SANITIZE_ADDRESS__ 1
#endif
#endif

static struct {
    long requests;              /* malloc, calloc and realloc so far */
    long live;                  /* blocks not given back */
    long fail_at;               /* number of the request that fails; -1: none */
    bool for_good;              /* all later ones fail too */
    void (*seen)(long request); /* told of every request when set; may ask for nothing itself */
} memory = {.fail_at = -1};

/* Counts a request; does it fail? */
static inline bool memory_fails(void)
{
    const long number = memory.requests++;
    if (memory.seen != NULL) memory.seen(number);
    return memory.fail_at >= 0 && (number == memory.fail_at || (memory.for_good && number > memory.fail_at));
}

#if defined(__GLIBC__) && !defined(__SANITIZE_ADDRESS__)
#define COUNTS_MEMORY 1
#define SEEN __attribute__((visibility("default"))) /* the sources are compiled with -fvisibility=hidden */
void *__libc_malloc(size_t size);
void *__libc_calloc(size_t n, size_t size);
void *__libc_realloc(void *p, size_t size);
void __libc_free(void *p);
SEEN void *malloc(size_t size);
SEEN void *calloc(size_t n, size_t size);
SEEN void *realloc(void *p, size_t size);
SEEN void free(void *p);

static void *memory_counted(void *p)
{
    memory.live += p != NULL;
    return p;
}

void *malloc(size_t size)
{
    return memory_fails() ? NULL : memory_counted(__libc_malloc(size));
}

void *calloc(size_t n, size_t size)
{
    return memory_fails() ? NULL : memory_counted(__libc_calloc(n, size));
}

void *realloc(void *p, size_t size)
{
    if (memory_fails()) return NULL;
    memory.live -= p != NULL;
    return memory_counted(__libc_realloc(p, size));
}

void free(void *p)
{
    memory.live -= p != NULL;
    __libc_free(p);
}
#else
#define COUNTS_MEMORY 0
#endif
#endif
