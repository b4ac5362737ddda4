/* support: a folder for one test's files, a small plant, and what a readings file became, as text:
 * one line for each row handed over, so that a test compares whole files at once. */
#ifndef WEIRBOOK_TESTS_INTAKE_SUPPORT_H
#define WEIRBOOK_TESTS_INTAKE_SUPPORT_H

#include "intake/intake.h"

struct scene {
    struct arena *arena;
    char folder[64];     /* gone with the scene */
    struct plant *plant; /* see support.c */
    day_t today;         /* 2025-06-30 */
    struct text said;    /* the rows, or the fault with the folder's name taken off */
    struct intake_summary summary;
    long readings, asides;
};

int scene_setup(void **state);
int scene_teardown(void **state);

/* A file of the scene's folder; returns its path. */
const char *scene_file(struct scene *s, const char *name, const char *bytes);
const char *scene_bytes(struct scene *s, const char *name, const void *bytes, size_t length);
const char *scene_path(struct scene *s, const char *name);
/* Reads readings.csv of this text. said gets lines such as
 *   "2 2025-03-04 08:00 EFF BOD5 plain 7.5 mg/L"        line date time point parameter qualifier
 *   "3 unknown-point: no point 'EFE'; the nearest is 'EFF'"   (line:column in a wide file)
 * or, after a FAULT, the fault's line alone. Checks that the counts add up. */
const char *scene_read(struct scene *s, const char *text);
const char *scene_read_with(struct scene *s, const char *text, const char *map,
                            const char *dialect);
const char *scene_read_path(struct scene *s, const char *path, const char *map,
                            const char *dialect);
/* Checks said by said; the message of a failure shows the input. */
void assert_said(const char *said, const char *expected, const char *input);
/* The checkout this file stands in, with a slash. */
const char *checkout(struct arena *a);
/* Reads a description folder; fails the test on any problem. */
struct plant *plant_in(struct arena *a, const char *folder);

#endif
