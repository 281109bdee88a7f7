/* What a summary says of members that carry moments. */
#ifndef SCT_REPORT_SUMMARY_BENT_H
#define SCT_REPORT_SUMMARY_BENT_H

#include "report/page.h"

/** The place where the worst member of each group governs, with its forces; nothing without bent members. */
void sct_summary_bending(const sct_page *p);
/** The worst limits on bows. */
void sct_summary_bows(const sct_page *p);
/** The moments that supports give. */
void sct_summary_moments(const sct_page *p);
#endif
