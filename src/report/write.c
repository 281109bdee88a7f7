/* The public writers: one call, every format. */
#include "scantling.h"

#include <stdlib.h>

#include "base/text.h"
#include "model/rewrite.h"
#include "report/csv.h"
#include "report/drawing.h"
#include "report/json.h"
#include "report/summary.h"

sct_write_options sct_write_defaults(void)
{
    return (sct_write_options){.combination = -1};
}

static sct_status write_model(const sct_result *result, sct_text *out)
{
    sct_size_choice *choice = calloc((size_t)result->n_groups + 1, sizeof *choice);
    if (choice == NULL) return SCT_NO_MEMORY;
    for (int g = 0; g < result->n_groups; g++) {
        choice[g] = (sct_size_choice){result->groups[g].section, result->groups[g].A};
    }
    const sct_status status = sct_model_rewrite(result->model, choice, out);
    free(choice);
    return status;
}

static sct_status write_format(const sct_result *result, sct_format format, const sct_write_options *options,
                               sct_text *out)
{
    switch (format) {
    case SCT_SUMMARY: return sct_summary(result, options->colour, out);
    case SCT_RESULT_JSON: return sct_result_json(result, out);
    case SCT_SCHEDULE_CSV: return sct_schedule_csv(result, out);
    case SCT_MODEL_JSON: return write_model(result, out);
    case SCT_DRAWING_SVG: return sct_drawing_svg(result, options, out);
    }
    return SCT_BAD_INPUT;
}

sct_status sct_write(const sct_result *result, sct_format format, const sct_write_options *options, char **text,
                     size_t *size)
{
    const sct_write_options defaults = sct_write_defaults();
    sct_text out = {0};
    *text = NULL;
    const sct_status status = write_format(result, format, options != NULL ? options : &defaults, &out);
    if (status != SCT_OK) {
        sct_text_free(&out);
        return status;
    }
    *text = sct_text_take(&out, size);
    return *text != NULL ? SCT_OK : SCT_NO_MEMORY;
}
