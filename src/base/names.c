/* Names to indices: open addressing with FNV-1a; and the nearest known name. */
#include "names.h"

#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include "scantling.h"

struct sct_names {
    int n, room;       /* names, and places for them */
    const char **name; /* in the order they were put */
    int *index;
    int *slot; /* hash table of places in `name`, -1 when empty */
    uint32_t mask;
};

static uint32_t hash(const char *s)
{
    uint32_t h = 2166136261u; /* FNV-1a, 32 bit */
    for (; *s != '\0'; s++) h = (h ^ (unsigned char)*s) * 16777619u;
    return h;
}

static bool resize(sct_names *t, int room)
{
    uint32_t slots = 16;
    while (slots < 2u * (uint32_t)room) slots *= 2;
    const char **name = realloc(t->name, (size_t)room * sizeof *name);
    if (name == NULL) return false;
    t->name = name;
    int *index = realloc(t->index, (size_t)room * sizeof *index);
    if (index == NULL) return false;
    t->index = index;
    int *slot = malloc(slots * sizeof *slot);
    if (slot == NULL) return false;
    free(t->slot);
    t->slot = slot;
    t->mask = slots - 1;
    t->room = room;
    memset(slot, -1, slots * sizeof *slot);
    for (int i = 0; i < t->n; i++) {
        uint32_t k = hash(t->name[i]) & t->mask;
        while (slot[k] >= 0) k = (k + 1) & t->mask;
        slot[k] = i;
    }
    return true;
}

sct_names *sct_names_new(int room)
{
    sct_names *t = calloc(1, sizeof *t);
    if (t == NULL) return NULL;
    if (!resize(t, room > 8 ? room : 8)) {
        sct_names_free(t);
        return NULL;
    }
    return t;
}

void sct_names_free(sct_names *t)
{
    if (t == NULL) return;
    free(t->name);
    free(t->index);
    free(t->slot);
    free(t);
}

static uint32_t slot_of(const sct_names *t, const char *name)
{
    uint32_t k = hash(name) & t->mask;
    while (t->slot[k] >= 0 && strcmp(t->name[t->slot[k]], name) != 0) k = (k + 1) & t->mask;
    return k;
}

bool sct_names_put(sct_names *t, const char *name, int index)
{
    if (t->n == t->room && (t->room > (1 << 28) || !resize(t, 2 * t->room))) return false;
    const uint32_t k = slot_of(t, name);
    if (t->slot[k] >= 0) return true;
    t->name[t->n] = name;
    t->index[t->n] = index;
    t->slot[k] = t->n++;
    return true;
}

int sct_names_find(const sct_names *t, const char *name)
{
    const int at = t->slot[slot_of(t, name)];
    return at < 0 ? -1 : t->index[at];
}

int sct_names_count(const sct_names *t)
{
    return t->n;
}

const char *sct_names_at(const sct_names *t, int i)
{
    return t->name[i];
}

/* Edit distance with swaps of neighbours (optimal string alignment), or `most` + 1 when it is above `most`. */
static int edits(const char *a, const char *b, int most)
{
    enum { ROOM = 64 };
    const int na = (int)strlen(a), nb = (int)strlen(b);
    if (na >= ROOM || nb >= ROOM || abs(na - nb) > most) return most + 1;
    int row[3][ROOM];
    for (int j = 0; j <= nb; j++) row[0][j] = j;
    for (int i = 1; i <= na; i++) {
        int *now = row[i % 3];
        const int *up = row[(i + 2) % 3], *upup = row[(i + 1) % 3];
        now[0] = i;
        for (int j = 1; j <= nb; j++) {
            int d = up[j - 1] + (a[i - 1] != b[j - 1]);
            if (up[j] + 1 < d) d = up[j] + 1;
            if (now[j - 1] + 1 < d) d = now[j - 1] + 1;
            if (i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1] && upup[j - 2] + 1 < d)
                d = upup[j - 2] + 1;
            now[j] = d;
        }
    }
    return row[na % 3][nb] <= most ? row[na % 3][nb] : most + 1;
}

static int common_beginning(const char *a, const char *b)
{
    int n = 0;
    while (a[n] != '\0' && a[n] == b[n]) n++;
    return n;
}

/* Of several at the same distance, the one that begins most like it. */
const char *sct_nearest(const char *const list[], int n, const char *name)
{
    const int third = (int)(strlen(name) / 3);
    const bool is_letter = strlen(name) == 1; /* one edit away from every other: only its other case is near */
    int most = third > 2 ? 2 : third < 1 ? 1 : third;
    const char *best = NULL;
    for (int i = 0; i < n; i++) {
        if (list[i] == NULL || (is_letter && (list[i][0] | 0x20) != (name[0] | 0x20))) continue;
        const int d = edits(name, list[i], most);
        if (d > most) continue;
        if (best != NULL && d == most && common_beginning(name, list[i]) <= common_beginning(name, best)) continue;
        best = list[i];
        most = d;
    }
    return best;
}

const char *sct_names_nearest(const sct_names *t, const char *name)
{
    return sct_nearest(t->name, t->n, name);
}
