/* A model file written anew with sizes put in: the other keys, their order and their numbers stay. */
#ifndef SCT_MODEL_REWRITE_H
#define SCT_MODEL_REWRITE_H

#include "base/text.h"
#include "model/model.h"

/* The size of one group: a section's name, or an area where section is NULL. */
typedef struct sct_size_choice {
    const char *section;
    double A; /* [m2] */
} sct_size_choice;

/**
 * Appends the model with `choice[g]` for every group g that is not already held: a ladder group gains "section", a free
 * area's "area" becomes the number (with its unit). The result reads back as a model in which every group is held.
 *
 * SCT_OK, SCT_NO_MEMORY.
 */
sct_status sct_model_rewrite(const sct_model *model, const sct_size_choice choice[], sct_text *out);
#endif
