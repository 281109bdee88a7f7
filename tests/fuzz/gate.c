/* Fuzzing the gate: any bytes. What it accepts, cJSON accepts too, and the places that it gives lie in the text, one in
 * the other, in order; what it refuses has a message with a place in the text. */
#include "fuzz.h"

#include <string.h>

#include "model/document.h"
#include "model/gate.h"

static int lines_of(const char *text, size_t size)
{
    int lines = 1;
    for (size_t i = 0; i < size; i++)
        lines += text[i] == '\n' || (text[i] == '\r' && !(i + 1 < size && text[i + 1] == '\n'));
    return lines;
}

static void check_places(const char *text, size_t size, const sct_gate_value *v, size_t n)
{
    const int lines = lines_of(text, size);
    MUST(n > 0);
    for (size_t i = 0; i < n; i++) {
        MUST(v[i].begin < v[i].end && v[i].end <= size);
        MUST(v[i].line >= 1 && v[i].line <= lines && v[i].column >= 1);
        MUST(i == 0 || v[i].begin > v[i - 1].begin);
        if (v[i].key_end == 0) continue;
        MUST(v[i].key_begin < v[i].key_end && v[i].key_end < v[i].begin);
        MUST(text[v[i].key_begin] == '"' && text[v[i].key_end - 1] == '"');
    }
}

int LLVMFuzzerTestOneInput(const unsigned char *data, size_t size)
{
    char *text = fuzz_copy(data, size);
    sct_issues *issues = sct_issues_new();
    sct_gate_value *values = NULL;
    size_t n = 0;
    MUST(issues != NULL);
    const sct_status status = sct_gate_check("fuzz", text, size, &values, &n, issues);
    MUST(status == SCT_OK || status == SCT_BAD_INPUT || status == SCT_TOO_LARGE);
    MUST((status == SCT_OK) == (values != NULL) && (status == SCT_OK) == (sct_issues_errors(issues) == 0));
    for (int i = 0; i < sct_issues_count(issues); i++) {
        const sct_issue *issue = sct_issues_get(issues, i);
        MUST(issue->line <= lines_of(text, size));
        free(sct_issue_line(issue));
    }
    if (status == SCT_OK) {
        check_places(text, size, values, n);
        sct_document *document = NULL;
        MUST(sct_document_parse("fuzz", text, size, &document, issues) ==
             SCT_OK); /* joins the places with cJSON's tree */
        sct_document_free(document);
    }
    free(values);
    sct_issues_free(issues);
    free(text);
    return 0;
}
