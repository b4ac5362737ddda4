/* Faults: what went wrong, where, and what to do, as one line. */
#include "base/base.h"

#include <string.h>

#include "base/poison.h"

enum { WHAT_BYTES = 1 << 16 };

void fault_clear(struct fault *f)
{
    *f = (struct fault){.set = false};
}

static void add_place(struct text *line, const struct place *where)
{
    if (where == NULL || where->file == NULL)
        return;
    text_add_escaped(line, where->file);
    if (where->line > 0) {
        text_print(line, ":%ld", where->line);
        if (where->column > 0)
            text_print(line, ":%d", where->column);
    }
    text_add(line, ": ");
}

/* Shortens s to at most `most` bytes, dots included, without leaving half a character. */
static void shorten(struct text *s, size_t most)
{
    if (s->length <= most)
        return;
    size_t keep = most > 3 ? most - 3 : 0;
    while (keep > 0 && ((unsigned char)s->at[keep] & 0xc0) == 0x80)
        keep--;
    s->length = keep;
    text_add(s, "...");
}

/* A line too long loses the end of what happened, never what to do about it. */
static void compose(struct fault *f, const struct place *where, const char *todo, const char *what)
{
    struct text place, rest, middle;
    text_init(&place, sizeof f->text / 3);
    text_init(&rest, sizeof f->text / 3);
    text_init(&middle, WHAT_BYTES);
    add_place(&place, where);
    if (todo != NULL) {
        text_add(&rest, "; ");
        text_add_escaped(&rest, todo);
    }
    text_add_escaped(&middle, what);
    shorten(&middle, sizeof f->text - 1 - place.length - rest.length);
    snprintf(f->text, sizeof f->text, "%s%s%s", place.at, middle.at, rest.at);
    text_free(&place);
    text_free(&rest);
    text_free(&middle);
}

static enum status set(struct fault *f, enum fault_kind kind, const struct place *where,
                       const char *todo, const char *what, va_list ap)
{
    if (f->set)
        return FAULT;
    struct text said;
    text_init(&said, WHAT_BYTES);
    text_vprint(&said, what, ap);
    f->set = true;
    f->kind = kind;
    compose(f, where, todo, said.at);
    text_free(&said);
    return FAULT;
}

enum status fault_at(struct fault *f, const struct place *where, const char *todo, const char *what,
                     ...)
{
    va_list ap;
    va_start(ap, what);
    enum status rc = set(f, FAULT_FAILED, where, todo, what, ap);
    va_end(ap);
    return rc;
}

enum status fault_usage(struct fault *f, const char *todo, const char *what, ...)
{
    va_list ap;
    va_start(ap, what);
    enum status rc = set(f, FAULT_USAGE, NULL, todo, what, ap);
    va_end(ap);
    return rc;
}
