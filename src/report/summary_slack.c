#include "report/summary_slack.h"

#include "base/text.h"

enum { MOST_NAMES = 8, MOST_COMBINATIONS = 12 };

/* In "wind": "up 1", "up 2" and 3 more */
static void add_combination(const sct_page *p, int c)
{
    const sct_result *r = p->r;
    const bool *slack = r->slack + (size_t)c * (size_t)r->n_members;
    sct_text line = {0};
    int n = 0;
    sct_text_format(&line, "In \"%s\": ", sct_show(r->combinations[c]).text);
    for (int m = 0; m < r->n_members; m++) {
        if (!slack[m] || n++ >= MOST_NAMES) continue;
        sct_text_format(&line, "%s\"%s\"", n > 1 ? ", " : "", sct_show(r->members[m].name).text);
    }
    if (n == 0) sct_text_add(&line, "none");
    if (n > MOST_NAMES) sct_text_format(&line, " and %d more", n - MOST_NAMES);
    if (line.failed)
        p->out->failed = true;
    else
        sct_page_wrapped_plain(p->out, line.data, 2);
    sct_text_free(&line);
}

void sct_summary_slack(const sct_page *p)
{
    if (p->r->slack == NULL) return;
    sct_page_heading(p, "Slack, of the members that carry tension only");
    for (int c = 0; c < p->r->n_combinations && c < MOST_COMBINATIONS; c++) add_combination(p, c);
    sct_page_say_left_out(p, p->r->n_combinations - MOST_COMBINATIONS, "result.json");
}
