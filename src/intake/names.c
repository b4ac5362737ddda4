/* names: a hash table of a plant's ids (FNV-1a, open addressing). A plant has few; a file asks for
 * three of them in each of a million rows. */
#include "intake/names.h"

#include <assert.h>
#include <string.h>

#include "base/poison.h"

void names_new(struct names *n, struct arena *a, size_t count)
{
    size_t slots = 16;
    while (slots < 2 * count + 1)
        slots *= 2;
    n->slot = arena_alloc(a, slots * sizeof *n->slot);
    n->mask = slots - 1;
}

static size_t hash(const char *s)
{
    uint32_t h = 2166136261U;
    for (; *s != '\0'; s++)
        h = (h ^ (unsigned char)*s) * 16777619U;
    return h;
}

void names_add(struct names *n, const char *text, int index)
{
    size_t i = hash(text) & n->mask;
    while (n->slot[i].text != NULL)
        i = (i + 1) & n->mask;
    n->slot[i] = (struct name){text, index};
}

int names_find(const struct names *n, const char *text)
{
    for (size_t i = hash(text) & n->mask; n->slot[i].text != NULL; i = (i + 1) & n->mask)
        if (strcmp(n->slot[i].text, text) == 0)
            return n->slot[i].index;
    return -1;
}
