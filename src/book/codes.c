/* codes: a table of hashed keys with open places, at most half full. */
#include "book/codes.h"

#include <assert.h>
#include <string.h>

#include "base/poison.h"

void codes_init(struct codes *c)
{
    c->arena = arena_new();
    c->slot = arena_alloc(c->arena, CODES_SLOTS * sizeof *c->slot);
    c->count = 0;
}

void codes_free(struct codes *c)
{
    arena_free(c->arena);
    *c = (struct codes){0};
}

/* Eight bytes at a time; any mixing does, since keys are compared. */
static uint64_t hash_of(const uint8_t *key, size_t length)
{
    uint64_t h = length * 0x9e3779b97f4a7c15U, word = 0;
    for (; length >= sizeof word; key += sizeof word, length -= sizeof word) {
        memcpy(&word, key, sizeof word);
        h = (h ^ word) * 0x9e3779b97f4a7c15U;
        h ^= h >> 29;
    }
    word = 0;
    memcpy(&word, key, length);
    h = (h ^ word) * 0x9e3779b97f4a7c15U;
    return h ^ h >> 32;
}

/* Where the key stands, or the open place where it would. */
static struct code *place_of(const struct codes *c, uint64_t hash, const void *key, size_t length)
{
    size_t i = hash % CODES_SLOTS;
    for (;; i = (i + 1) % CODES_SLOTS) {
        struct code *s = &c->slot[i];
        if (!s->key || (s->hash == hash && s->length == length && memcmp(s->key, key, length) == 0))
            return s;
    }
}

int64_t codes_find(const struct codes *c, const void *key, size_t length)
{
    const struct code *s = place_of(c, hash_of(key, length), key, length);
    return s->key ? s->id : 0;
}

void codes_add(struct codes *c, const void *key, size_t length, int64_t id)
{
    if (c->count >= CODES_MOST || arena_used(c->arena) > CODES_BYTES_MOST) {
        codes_free(c);
        codes_init(c);
    }
    uint64_t hash = hash_of(key, length);
    struct code *s = place_of(c, hash, key, length);
    assert(!s->key);
    *s = (struct code){
        .hash = hash, .key = arena_bytes(c->arena, key, length), .length = length, .id = id};
    c->count++;
}
