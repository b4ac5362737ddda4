/* Small line charts in plain text: a process figure over time, 100 columns wide at most. */
#ifndef WEIRBOOK_CHART_H
#define WEIRBOOK_CHART_H

#include "process/process.h"

/* One chart for each figure of the table, in order of first appearance. A mark is the mean of the
 * days its column stands for; a column without a figure stays empty. */
void charts_write(FILE *out, struct arena *a, const struct process_figure *figures, size_t count,
                  day_t from, day_t to);

#endif
