/* words: every printed sentence of the reports, kept in reports/words.csv with named places, made
 * into one table at build time. An unknown name is a compile error, an unknown place in a sentence
 * a build error. Private to this room. */
#ifndef WEIRBOOK_REPORT_WORDS_H
#define WEIRBOOK_REPORT_WORDS_H

#include "base/base.h"

enum word {
#define SENTENCE(name, text) WORD_##name,
#include "words.inc"
#undef SENTENCE
    WORDS
};

enum place_name {
#define PLACE(name) PLACE_##name,
#include "words.inc"
#undef PLACE
    PLACES
};

/* A sentence without places, as it stands. */
const char *word(enum word w);

/* A sentence with its places filled in: SAY(a, SHORT_OF, [PLACE_TAKEN] = "11", ...). A place that
 * the sentence uses and the caller leaves out is a bug (asserted). In the arena. */
char *words_fill(struct arena *a, enum word w, const char *const value[PLACES]);
#define SAY(a, name, ...) words_fill((a), WORD_##name, (const char *const[PLACES]){__VA_ARGS__})

#endif
