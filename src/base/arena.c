/* Arenas: memory handed out from chunks and given back all at once. A chunk comes zeroed from the
 * system and no part of it is handed out twice, so every piece is zeroed without further work. */
#include "base/base.h"
#include "base/memory.h"

#include <assert.h>
#include <stdlib.h>
#include <string.h>

#include "base/poison.h"

enum { ALIGNMENT = 16 };
static const size_t chunk_smallest = 8192;
static const size_t chunk_largest = (size_t)1 << 20;

struct chunk {
    struct chunk *next;
    size_t used, room;
    _Alignas(ALIGNMENT) unsigned char bytes[];
};

struct arena {
    struct chunk *newest; /* the one pieces are cut from; large requests stand behind it */
    size_t next_room;
    size_t used;
};

struct arena *arena_new(void)
{
    struct arena *a = base_zeroed(sizeof *a);
    a->next_room = chunk_smallest;
    /* Every fraction needs an arena first, so this is early enough for libgmp. */
    fraction_use_base_memory();
    return a;
}

void arena_free(struct arena *a)
{
    if (a == NULL)
        return;
    struct chunk *c = a->newest;
    while (c != NULL) {
        struct chunk *next = c->next;
        free(c);
        c = next;
    }
    free(a);
}

static struct chunk *chunk_new(size_t room)
{
    if (room > SIZE_MAX - sizeof(struct chunk))
        base_out_of_memory();
    struct chunk *c = base_zeroed(sizeof *c + room);
    c->room = room;
    return c;
}

/* A large request gets a chunk of exactly its size: the rest of the newest chunk is not lost, and
 * an address checker sees the end of the piece. */
static void *alloc_large(struct arena *a, size_t size)
{
    struct chunk *c = chunk_new(size);
    c->used = size;
    if (a->newest == NULL) {
        a->newest = c;
    } else {
        c->next = a->newest->next;
        a->newest->next = c;
    }
    return c->bytes;
}

void *arena_alloc(struct arena *a, size_t size)
{
    if (size > SIZE_MAX - ALIGNMENT)
        base_out_of_memory();
    size_t padded = size == 0 ? ALIGNMENT : (size + ALIGNMENT - 1) / ALIGNMENT * ALIGNMENT;
    a->used += padded;
    struct chunk *c = a->newest;
    if (c == NULL || padded > c->room - c->used) {
        if (padded > a->next_room / 4)
            return alloc_large(a, size);
        c = chunk_new(a->next_room);
        c->next = a->newest;
        a->newest = c;
        if (a->next_room < chunk_largest)
            a->next_room *= 2;
    }
    void *piece = c->bytes + c->used;
    c->used += padded;
    return piece;
}

char *arena_text(struct arena *a, const char *s)
{
    return arena_bytes(a, s, strlen(s));
}

char *arena_bytes(struct arena *a, const char *s, size_t length)
{
    if (length == SIZE_MAX)
        base_out_of_memory();
    char *copy = arena_alloc(a, length + 1);
    if (length > 0)
        memcpy(copy, s, length);
    return copy;
}

char *arena_print(struct arena *a, const char *format, ...)
{
    va_list ap;
    va_start(ap, format);
    va_list again;
    va_copy(again, ap);
    int length = vsnprintf(NULL, 0, format, ap);
    va_end(ap);
    assert(length >= 0);
    char *s = arena_alloc(a, (size_t)length + 1);
    vsnprintf(s, (size_t)length + 1, format, again);
    va_end(again);
    return s;
}

void *arena_push(struct arena *a, void *array_pointer, size_t *count, size_t *capacity, size_t size)
{
    assert(size > 0 && *count <= *capacity);
    /* The caller's pointer is one to its own element type; copying its bytes keeps within the
     * aliasing rules. */
    void *array = NULL;
    memcpy(&array, array_pointer, sizeof array);
    if (*count == *capacity) {
        size_t room = *capacity == 0 ? 8 : *capacity * 2;
        if (room > SIZE_MAX / 2 / size)
            base_out_of_memory();
        void *larger = arena_alloc(a, room * size);
        if (*count > 0)
            memcpy(larger, array, *count * size);
        array = larger;
        *capacity = room;
        memcpy(array_pointer, &array, sizeof array);
    }
    unsigned char *element = (unsigned char *)array + *count * size;
    memset(element, 0, size); /* it may have been used and given back */
    ++*count;
    return element;
}

size_t arena_used(const struct arena *a)
{
    return a->used;
}
