/* What every command works with: its words, its book, where it prints. */
#ifndef WEIRBOOK_SESSION_H
#define WEIRBOOK_SESSION_H

#include "base/base.h"
#include "book/book.h"
#include "command/command.h"
#include "plant/plant.h"
#include "report/report.h"

enum as { AS_TEXT, AS_CSV, AS_JSON };
#define AS_WORDS "text|csv|json"
#define AS_OPTION(type)                                                                            \
    {                                                                                              \
        "as", OPTION_ONE_OF, offsetof(type, as), AS_WORDS, "how to print: text, csv or json",      \
            false                                                                                  \
    }

#define AS_OF_OPTION(type)                                                                         \
    {                                                                                              \
        "as-of", OPTION_DAY, offsetof(type, as_of), "DATE",                                        \
            "from the book as it stood at the end of that day (UTC)", false                        \
    }

struct session {
    struct arena *arena;
    const struct command *const *table; /* all commands: help and completion need them */
    size_t commands;
    const struct command *command;
    const char *const *operand;
    size_t operands;
    const char *book_path; /* the last -b, or $WEIRBOOK; NULL: not said */
    const char **books;    /* every -b */
    size_t book_count, book_room;
    const char *by; /* who, for the record */
    bool read_only; /* from --read-only: whatever would write the book is refused */
    day_t as_of;    /* set before the book is opened: read as it stood then; DAY_NONE */
    FILE *out;
    bool found; /* ends with status 3 */
    int width;
    bool colour;
    struct book *book; /* opened by session_book, closed at the end */
};

/* Notes a book that -b names. */
void session_name(struct session *s, const char *path);
/* Opens the book that -b, $WEIRBOOK or the current folder names, and its plant. */
MUST_USE enum status session_book(struct session *s, enum book_mode mode,
                                  struct plant_draft **draft, struct plant **plant,
                                  struct fault *f);
/* The same without its plant. With as_of set it is read as it stood at the end of that day. */
MUST_USE enum status session_open(struct session *s, enum book_mode mode, struct fault *f);
/* Who is at work and when, for the record. A name with control bytes is refused. */
MUST_USE enum status session_author(struct session *s, const char *by, struct author *out,
                                    struct fault *f);
/* A reason or remark for the record: one line of text that can be read. `option`: "--reason". */
MUST_USE enum status session_record(const char *option, const char *text, struct fault *f);
/* The number of a batch or remark as a person writes it; `lister` is the command that lists them.
 */
MUST_USE enum status session_number(const char *what, const char *lister, const char *text,
                                    int64_t *out, struct fault *f);
/* The index of a point or parameter; an unknown one is answered with the nearest. */
MUST_USE enum status session_point(const struct plant *plant, const char *id, int *out,
                                   struct fault *f);
MUST_USE enum status session_parameter(const struct plant *plant, const char *id, int *out,
                                       struct fault *f);
/* Refuses to write under --read-only. */
MUST_USE enum status session_may_write(const struct session *s, struct fault *f);
/* Prints a page as text, or its table as csv or json. */
void session_print(struct session *s, int as, const struct page *page, const struct table *table);
/* Fills a frame with the spans' readings. */
MUST_USE enum status session_frame(struct session *s, const struct plant *plant,
                                   const struct frame_span *spans, size_t count, day_t first,
                                   day_t last, struct frame **out, struct fault *f);
/* The same with every column that has a reading in first..last. */
MUST_USE enum status session_frame_all(struct session *s, const struct plant *plant, day_t first,
                                       day_t last, struct frame **out, struct fault *f);

/* options.c: fills `options` from the words after the command's name; operands go to the session.
 */
MUST_USE enum status options_read(struct session *s, const struct command *c, int argc, char **argv,
                                  void *options, bool *help, struct fault *f);
/* help.c */
void help_program(struct session *s);
void help_command(struct session *s, const struct command *c);
const struct command *command_find(const struct session *s, const char *name);
MUST_USE enum status command_unknown(const struct session *s, const char *name, struct fault *f);

#endif
