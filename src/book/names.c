/* names: what the codes in the tables stand for. Series and units are few and read once; details
 * and files are many and looked up when they are met, the last ones kept. */
#include "book/store.h"

#include <string.h>

#include "base/poison.h"

enum { PASSING_BYTES_MOST = 4 << 20 };

static enum status read_series(struct book *b, struct names *n, const struct plant *plant,
                               struct fault *f)
{
    sqlite3_stmt *q = NULL;
    bool row;
    if (book_statement(b, SERIES_NAMES, &q, f) != OK)
        return FAULT;
    for (;;) {
        if (book_step(b, q, &row, f) != OK)
            return FAULT;
        if (!row)
            return OK;
        struct series_name *s =
            arena_push(n->arena, &n->series, &n->series_count, &n->series_room, sizeof *s);
        *s = (struct series_name){
            .id = sqlite3_column_int64(q, 0),
            .point = arena_text(n->arena, column_text(q, 1)),
            .parameter = arena_text(n->arena, column_text(q, 2)),
            .sample = arena_text(n->arena, column_text(q, 3)),
        };
        s->plant_point = plant ? plant_point(plant, s->point) : -1;
        s->plant_parameter = plant ? plant_parameter(plant, s->parameter) : -1;
    }
}

enum status names_begin(struct book *b, struct names *n, struct arena *a, const struct plant *plant,
                        bool passing, struct fault *f)
{
    memset(n, 0, sizeof *n);
    n->arena = a;
    n->passing = passing ? arena_new() : NULL;
    return read_series(b, n, plant, f);
}

void names_end(struct names *n)
{
    arena_free(n->passing);
    n->passing = NULL;
}

/* The element with an id, in an array in order of the ids its elements begin with. They have no
 * gaps but in a damaged book, so the first guess is mostly right. */
static const void *find(const void *array, size_t count, size_t size, int64_t id)
{
    size_t low = 0, high = count;
    size_t at = id >= 1 && (uint64_t)id <= count ? (size_t)(id - 1) : count / 2;
    while (low < high) {
        int64_t here;
        const char *element = (const char *)array + at * size;
        memcpy(&here, element, sizeof here);
        if (here == id)
            return element;
        if (here < id)
            low = at + 1;
        else
            high = at;
        at = low + (high - low) / 2;
    }
    return NULL;
}

const struct series_name *names_series(const struct names *n, int64_t id)
{
    _Static_assert(offsetof(struct series_name, id) == 0, "find reads the first member");
    return find(n->series, n->series_count, sizeof *n->series, id);
}

/* Where texts that were looked up go. */
static struct arena *keeping(struct names *n)
{
    return n->passing ? n->passing : n->arena;
}

void names_turn(struct names *n)
{
    if (!n->passing || arena_used(n->passing) <= PASSING_BYTES_MOST)
        return;
    arena_free(n->passing);
    n->passing = arena_new();
    memset(n->detail, 0, sizeof n->detail);
    memset(n->file, 0, sizeof n->file);
}

static struct names_slot *slot_of(struct names_slot *slots, int64_t id)
{
    return &slots[(uint64_t)id % NAMES_SLOTS];
}

/* A limit as the table has it. One that is no number keeps a scale that no reading was ever marked
 * with. */
static void read_limit(const char *text, bool *has, struct decimal *out)
{
    *has = *text != '\0';
    if (*has && decimal_parse(text, strlen(text), out) != DECIMAL_FINE)
        out->scale = -1;
}

static const struct common *common_of(struct arena *a, sqlite3_stmt *q)
{
    struct common *c = arena_alloc(a, sizeof *c);
    c->unit_name = arena_text(a, column_text(q, 0));
    const struct unit *known = unit_find(c->unit_name);
    c->unit = known ? unit_index(known) : -1;
    read_limit(column_text(q, 1), &c->has_mdl, &c->mdl);
    read_limit(column_text(q, 2), &c->has_rl, &c->rl);
    c->detail.method = arena_text(a, column_text(q, 3));
    c->detail.analyst = arena_text(a, column_text(q, 4));
    c->detail.collected_by = arena_text(a, column_text(q, 5));
    c->detail.analyzed = arena_text(a, column_text(q, 6));
    c->detail.note = arena_text(a, column_text(q, 7));
    return c;
}

enum status names_common(struct book *b, struct names *n, int64_t detail, const struct common **out,
                         struct fault *f)
{
    struct names_slot *slot = slot_of(n->detail, detail);
    sqlite3_stmt *q = NULL;
    bool row;
    *out = slot->what;
    if (slot->what && slot->id == detail)
        return OK;
    *out = NULL;
    if (book_statement(b, DETAIL_AT, &q, f) != OK)
        return FAULT;
    bind_int(q, 1, detail);
    if (book_step(b, q, &row, f) != OK)
        return FAULT;
    if (!row)
        return OK;
    const struct common *c = common_of(keeping(n), q);
    if (book_step(b, q, &row, f) != OK) /* tells when a text could not be had */
        return FAULT;
    *slot = (struct names_slot){detail, c};
    *out = c;
    return OK;
}

enum status names_file(struct book *b, struct names *n, int64_t batch, const char **out,
                       struct fault *f)
{
    struct names_slot *slot = slot_of(n->file, batch);
    sqlite3_stmt *q = NULL;
    bool row;
    *out = slot->what;
    if (slot->what && slot->id == batch)
        return OK;
    if (book_statement(b, FILE_OF_BATCH, &q, f) != OK)
        return FAULT;
    bind_int(q, 1, batch);
    if (book_step(b, q, &row, f) != OK)
        return FAULT;
    const char *file = arena_text(keeping(n), row ? column_text(q, 0) : "");
    if (row && book_step(b, q, &row, f) != OK)
        return FAULT;
    *slot = (struct names_slot){batch, file};
    *out = file;
    return OK;
}
