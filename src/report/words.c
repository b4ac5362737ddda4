/* words: the table of sentences, and the filling of their places. */
#include "report/words.h"

#include <assert.h>

#include "base/poison.h"

static const char *const words_table[WORDS] = {
#define SENTENCE(name, text) [WORD_##name] = (text),
#include "words.inc"
#undef SENTENCE
};

const char *word(enum word w)
{
    assert((size_t)w < NELEM(words_table));
    return words_table[w];
}

char *words_fill(struct arena *a, enum word w, const char *const value[PLACES])
{
    struct text t;
    text_init(&t, (size_t)1 << 20);
    const char *s = word(w);
    while (*s != '\0') {
        if (*s != '{') {
            text_add_char(&t, *s++);
            continue;
        }
        /* A place is its number in braces: words.cmake made it so. */
        size_t place = 0;
        for (s++; *s != '}'; s++)
            place = place * 10 + (size_t)(*s - '0');
        s++;
        assert(place < PLACES && value[place] != NULL);
        text_add(&t, value[place]);
    }
    char *filled = arena_bytes(a, t.at, t.length);
    text_free(&t);
    return filled;
}
