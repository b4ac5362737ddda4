/* pack: records into bytes, and the two hashes over them. */
#include "book/pack.h"

#include <string.h>

#include "base/poison.h"

enum { INT_MOST = 10, FIRST_ROOM = 1024 };

void pack_init(struct pack *p, struct arena *a)
{
    *p = (struct pack){.arena = a, .at = arena_alloc(a, FIRST_ROOM), .room = FIRST_ROOM};
}

void pack_clear(struct pack *p)
{
    p->length = 0;
}

/* Sizes double, so what is left behind in the arena is never more than what is in use. */
static void make_room(struct pack *p, size_t more)
{
    if (more <= p->room - p->length)
        return;
    size_t room = p->room;
    while (room - p->length < more)
        room *= 2;
    uint8_t *at = arena_alloc(p->arena, room);
    memcpy(at, p->at, p->length);
    p->at = at;
    p->room = room;
}

static size_t put(uint8_t *at, uint64_t n)
{
    size_t length = 0;
    for (; n >= 128; n >>= 7)
        at[length++] = (uint8_t)(n | 128);
    at[length++] = (uint8_t)n;
    return length;
}

void pack_int(struct pack *p, int64_t n)
{
    make_room(p, INT_MOST);
    p->length += put(p->at + p->length, (uint64_t)n << 1 ^ (n < 0 ? UINT64_MAX : 0));
}

void pack_bytes(struct pack *p, const void *bytes, size_t length)
{
    make_room(p, length);
    memcpy(p->at + p->length, bytes, length);
    p->length += length;
}

void pack_text(struct pack *p, const char *s)
{
    if (!s) {
        pack_int(p, 0);
        return;
    }
    size_t length = strlen(s);
    make_room(p, INT_MOST + length);
    p->length += put(p->at + p->length, length + 1); /* absent and "" differ */
    memcpy(p->at + p->length, s, length);
    p->length += length;
}

int64_t pack_mark(const struct pack *p)
{
    uint64_t h = 0xcbf29ce484222325U;
    for (size_t i = 0; i < p->length; i++)
        h = (h ^ p->at[i]) * 0x100000001b3U;
    return (int64_t)(h & INT64_MAX);
}

/* ---- records ---- */

static void pack_optional(struct pack *p, bool has, int64_t coefficient, int64_t scale)
{
    pack_int(p, has);
    if (has) {
        pack_int(p, coefficient);
        pack_int(p, scale);
    }
}

static void pack_common(struct pack *p, const struct common *c)
{
    pack_int(p, c != NULL);
    if (!c)
        return;
    pack_text(p, c->unit_name);
    pack_optional(p, c->has_mdl, c->mdl.coefficient, c->mdl.scale);
    pack_optional(p, c->has_rl, c->rl.coefficient, c->rl.scale);
    pack_text(p, c->detail.method);
    pack_text(p, c->detail.analyst);
    pack_text(p, c->detail.collected_by);
    pack_text(p, c->detail.analyzed);
    pack_text(p, c->detail.note);
}

void pack_reading(struct pack *p, const struct stored *s)
{
    pack_clear(p);
    pack_bytes(p, "r", 1);
    pack_int(p, s->id);
    pack_int(p, s->batch);
    pack_int(p, s->line);
    pack_text(p, s->point);
    pack_text(p, s->parameter);
    pack_text(p, s->sample);
    pack_int(p, s->day);
    pack_int(p, s->minute);
    pack_int(p, s->version);
    pack_int(p, s->qualifier);
    pack_text(p, s->code);
    pack_text(p, s->value);
    pack_optional(p, s->has_number, s->coefficient, s->scale);
    pack_common(p, s->common);
}

void pack_aside(struct pack *p, const struct stored_aside *s)
{
    pack_clear(p);
    pack_bytes(p, "a", 1);
    pack_int(p, s->id);
    pack_int(p, s->batch);
    pack_int(p, s->line);
    pack_int(p, s->column);
    pack_optional(p, s->has_day, s->day, 0);
    for (size_t i = 0; i < LONG_COLUMNS; i++)
        pack_text(p, s->cell[i]);
    pack_text(p, s->raw);
    pack_text(p, s->reason);
    pack_text(p, s->explanation);
}

void pack_raw(struct pack *p, const struct stored_raw *s)
{
    pack_clear(p);
    pack_bytes(p, "b", 1);
    pack_int(p, s->id);
    pack_int(p, s->batch);
    pack_int(p, s->line);
    for (size_t i = 0; i < RAW_COLUMNS; i++)
        pack_text(p, s->cell[i]);
}

void pack_row(struct pack *p, const struct stored_row *s)
{
    const struct plant_layout *layout = plant_layout(s->kind);
    pack_clear(p);
    pack_bytes(p, "d", 1);
    pack_int(p, s->batch);
    pack_int(p, s->place);
    pack_text(p, layout->file);
    pack_int(p, s->builtin);
    pack_text(p, s->file);
    pack_int(p, s->line);
    /* By name, and only those there are: a column that a later program adds leaves old rows'
     * hashes. */
    for (size_t i = 0; i < layout->columns; i++) {
        if (!s->cell[i])
            continue;
        pack_text(p, layout->column[i]);
        pack_text(p, s->cell[i]);
    }
}

static void pack_load(struct pack *p, const struct stored_batch *s)
{
    pack_text(p, s->file);
    pack_int(p, s->bytes);
    pack_bytes(p, s->digest, DIGEST_BYTES);
    pack_text(p, s->dialect);
    pack_int(p, s->accepted);
    pack_int(p, s->present);
    pack_int(p, s->revised);
    pack_int(p, s->aside);
    pack_int(p, s->first_reading);
    pack_int(p, s->first_aside);
}

void pack_head(struct pack *p, struct digest *d, const struct stored_batch *s,
               const uint8_t previous[DIGEST_BYTES], const uint8_t content[DIGEST_BYTES],
               const uint8_t asides[DIGEST_BYTES], uint8_t head[DIGEST_BYTES])
{
    pack_clear(p);
    pack_text(p, "weirbook chain 1");
    pack_bytes(p, previous, DIGEST_BYTES);
    pack_int(p, s->id);
    pack_text(p, s->kind);
    pack_text(p, s->at);
    pack_text(p, s->who);
    pack_text(p, s->reason);
    pack_int(p, s->rows);
    pack_int(p, s->is_load);
    pack_int(p, s->is_description);
    if (s->is_load)
        pack_load(p, s);
    pack_bytes(p, content, DIGEST_BYTES);
    pack_bytes(p, asides, DIGEST_BYTES);
    if (s->is_bench) {
        pack_int(p, s->raw_values);
        pack_int(p, s->first_raw);
        pack_bytes(p, s->raw_digest, DIGEST_BYTES);
    }
    digest_add(d, p->at, p->length);
    digest_end(d, head);
}
