/* Names to indices, and the nearest known name for one that is not known. */
#ifndef SCT_BASE_NAMES_H
#define SCT_BASE_NAMES_H

#include <stdbool.h>

typedef struct sct_names sct_names;

/** A table that borrows the strings put in; NULL when out of memory. */
sct_names *sct_names_new(int room);
void sct_names_free(sct_names *names);
/** Adds a name with its index (later ones with the same name are not found). False when out of memory. */
bool sct_names_put(sct_names *names, const char *name, int index);
/** The index of a name, -1 when it is not known. */
int sct_names_find(const sct_names *names, const char *name);
int sct_names_count(const sct_names *names);
/** The name put in as number i, from 0. */
const char *sct_names_at(const sct_names *names, int i);
/** The known name nearest to `name`, as sct_nearest. */
const char *sct_names_nearest(const sct_names *names, const char *name);
#endif
