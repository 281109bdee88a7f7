/* Memory that is given back all at once: a chain of blocks. */
#include "arena.h"

#include <stdint.h>
#include <stdlib.h>
#include <string.h>

typedef struct block {
    struct block *next;
    size_t used, size;
    max_align_t data[];
} block;

struct sct_arena {
    block *head;
};

static const size_t BLOCK_BYTES = 64 * 1024;

sct_arena *sct_arena_new(void)
{
    return calloc(1, sizeof(sct_arena));
}

void sct_arena_free(sct_arena *arena)
{
    if (arena == NULL) return;
    for (block *b = arena->head; b != NULL;) {
        block *next = b->next;
        free(b);
        b = next;
    }
    free(arena);
}

void *sct_arena_array(sct_arena *arena, size_t n, size_t size)
{
    const size_t align = sizeof(max_align_t);
    if (size != 0 && n > (SIZE_MAX - 2 * align - sizeof(block)) / size) return NULL;
    const size_t bytes = (n * size + align) / align * align; /* at least one unit, so that n = 0 is a pointer too */
    block *b = arena->head;
    if (b == NULL || b->size - b->used < bytes) {
        const size_t room = bytes > BLOCK_BYTES ? bytes : BLOCK_BYTES;
        b = malloc(sizeof(block) + room);
        if (b == NULL) return NULL;
        *b = (block){.next = arena->head, .used = 0, .size = room};
        arena->head = b;
    }
    void *p = (char *)b->data + b->used;
    b->used += bytes;
    return memset(p, 0, bytes);
}

char *sct_arena_string(sct_arena *arena, const char *text, size_t length)
{
    char *copy = sct_arena_array(arena, length + 1, 1);
    if (copy != NULL) memcpy(copy, text, length);
    return copy;
}
