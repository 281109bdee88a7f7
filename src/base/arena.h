/* Memory that is given back all at once: strings and arrays of an object with one lifetime. */
#ifndef SCT_BASE_ARENA_H
#define SCT_BASE_ARENA_H

#include <stddef.h>

typedef struct sct_arena sct_arena;

/** NULL when out of memory. */
sct_arena *sct_arena_new(void);
void sct_arena_free(sct_arena *arena);

/** Zeroed memory for n things of `size` bytes, aligned for any type; NULL when out of memory or when n * size
 * overflows. n = 0 gives a valid pointer. Lives until the arena is freed. */
void *sct_arena_array(sct_arena *arena, size_t n, size_t size);

/** A zero-terminated copy of `length` bytes of text. */
char *sct_arena_string(sct_arena *arena, const char *text, size_t length);
#endif
