/* embedded: the built-in parameter catalogue and the starter description, compiled in. */
#ifndef WEIRBOOK_INTAKE_EMBEDDED_H
#define WEIRBOOK_INTAKE_EMBEDDED_H

#include "base/base.h"

/* "parameters.csv" (of schema/), "starter/plant.csv", "starter/points.csv", ... */
extern const struct embedded_file intake_files[];
extern const size_t intake_files_count;

#endif
