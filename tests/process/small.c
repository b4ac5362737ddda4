/* A small plant and its readings, from lines of text. */
#include "process/small.h"

#include <stdlib.h>
#include <string.h>

_Noreturn static void end(const char *why)
{
    fprintf(stderr, "the test's own plant is wrong: %s\n", why);
    exit(1);
}

static void add_row(struct arena *a, struct plant_draft *d, const struct small_row *row, long line)
{
    const struct plant_layout *layout = plant_layout(row->file);
    struct plant_row out = {.file = row->file, .name = layout->file, .line = line};
    const char *at = row->cells;
    for (size_t i = 0; i < layout->columns; i++) {
        size_t length = strcspn(at, ",");
        out.cell[i] = arena_bytes(a, at, length);
        out.at[i] = (int)i + 1;
        at += at[length] == ',' ? length + 1 : length;
    }
    plant_draft_add(d, &out);
}

struct plant *small_plant(struct arena *a, const struct small_row *rows, size_t count)
{
    struct plant_draft *d = plant_draft_new(a);
    struct plant *p = NULL;
    struct fault f = {.set = false};
    for (size_t i = 0; i < count; i++)
        add_row(a, d, &rows[i], (long)i + 2);
    if (plant_draft_finish(d, &p, &f) != OK)
        end(f.text);
    return p;
}

day_t small_day(const char *iso)
{
    day_t day;
    if (!day_parse(iso, &day))
        end(iso);
    return day;
}

static struct reading make(const struct plant *p, const struct small_reading *s)
{
    int point = plant_point(p, s->point);
    int parameter = plant_parameter(p, s->parameter);
    const char *digits = *s->value == '<' ? s->value + 1 : s->value;
    static const struct detail none = {"", "", "", "", ""};
    if (point < 0 || parameter < 0)
        end(s->point);
    struct reading r = {.day = small_day(s->day),
                        .minute = -1,
                        .point = (uint16_t)point,
                        .parameter = (uint16_t)parameter,
                        .unit = (uint16_t)unit_index(p->parameters[parameter].unit),
                        .text = s->value,
                        .sample = "",
                        .detail = &none,
                        .file = "inline"};
    r.qualifier = *s->value == '<' ? QUALIFIER_LESS : QUALIFIER_PLAIN;
    if (*s->value >= 'A' && *s->value <= 'Z') {
        r.qualifier = QUALIFIER_CODE;
        r.code = *s->value;
    } else if (decimal_parse(digits, strlen(digits), &r.value) != DECIMAL_FINE) {
        end(s->value);
    }
    return r;
}

struct frame *small_frame(struct arena *a, const struct plant *p, const char *first,
                          const char *last, const struct small_reading *readings, size_t count)
{
    struct frame *f = frame_new(a, p, small_day(first), small_day(last));
    for (size_t i = 0; i < count; i++) {
        struct reading r = make(p, &readings[i]);
        frame_add(f, &r);
    }
    frame_close(f);
    return f;
}

const struct process_figure *small_figure(const struct process_figure *figures, size_t count,
                                          const char *from, const char *name, const char *at,
                                          const char *parameter)
{
    for (size_t i = 0; i < count; i++) {
        const struct process_figure *f = &figures[i];
        if (f->from == small_day(from) && text_equal(f->name, name) && text_equal(f->at, at) &&
            (parameter == NULL || text_equal(f->parameter, parameter)))
            return f;
    }
    return NULL;
}
