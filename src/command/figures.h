/* How the operator's figures are printed. They are for steering the plant, not for the regulator:
 * text shows four significant figures and never rounds away whole units; csv and json show ten. */
#ifndef WEIRBOOK_FIGURES_H
#define WEIRBOOK_FIGURES_H

#include "base/base.h"

enum { FIGURES_TEXT = 4, FIGURES_FILE = 10 };

/* "" for NULL. */
const char *figure_print(struct arena *a, const struct fraction *value, int figures);

#endif
