/* Text: growing buffers, comparison, UTF-8, width on a terminal, and the nearest known word. */
#include "base/base.h"
#include "base/memory.h"

#include <assert.h>
#include <stdlib.h>
#include <string.h>
#include <utf8proc.h>

#include "base/poison.h"

/* ---- the buffer ---- */

void text_init(struct text *t, size_t ceiling)
{
    if (ceiling == SIZE_MAX)
        ceiling--; /* the NUL needs one more */
    size_t room = ceiling < 63 ? ceiling + 1 : 64;
    *t = (struct text){.at = base_zeroed(room), .room = room, .ceiling = ceiling};
}

void text_free(struct text *t)
{
    free(t->at);
    *t = (struct text){0};
}

void text_clear(struct text *t)
{
    assert(t->at != NULL);
    t->length = 0;
    t->at[0] = '\0';
    t->overflowed = false;
}

/* Makes room for `more` bytes and a NUL as far as the ceiling allows; returns how many bytes fit.
 */
static size_t grow(struct text *t, size_t more)
{
    assert(t->at != NULL);
    size_t fits = t->ceiling - t->length;
    if (more > fits) {
        t->overflowed = true;
        more = fits;
    }
    size_t need = t->length + more + 1;
    if (need > t->room) {
        size_t room = t->room > t->ceiling / 2 ? t->ceiling + 1 : t->room * 2;
        if (room < need)
            room = need;
        t->at = base_resize(t->at, room);
        t->room = room;
    }
    return more;
}

void text_add(struct text *t, const char *s)
{
    text_add_bytes(t, s, strlen(s));
}

void text_add_bytes(struct text *t, const char *s, size_t length)
{
    size_t fits = grow(t, length);
    if (fits > 0)
        memcpy(t->at + t->length, s, fits);
    t->length += fits;
    t->at[t->length] = '\0';
}

void text_add_char(struct text *t, char c)
{
    text_add_bytes(t, &c, 1);
}

void text_print(struct text *t, const char *format, ...)
{
    va_list ap;
    va_start(ap, format);
    text_vprint(t, format, ap);
    va_end(ap);
}

void text_vprint(struct text *t, const char *format, va_list ap)
{
    va_list again;
    va_copy(again, ap);
    int length = vsnprintf(NULL, 0, format, ap);
    assert(length >= 0);
    size_t fits = grow(t, (size_t)length);
    vsnprintf(t->at + t->length, fits + 1, format, again);
    va_end(again);
    t->length += fits;
}

/* ---- comparison ---- */

bool text_equal(const char *a, const char *b)
{
    if (a == NULL || b == NULL)
        return a == b;
    return strcmp(a, b) == 0;
}

/* By hand: tolower() follows the locale. */
static char lower(char c)
{
    return c >= 'A' && c <= 'Z' ? (char)(c - 'A' + 'a') : c;
}

bool text_equal_nocase(const char *a, const char *b)
{
    if (a == NULL || b == NULL)
        return a == b;
    while (*a != '\0' && lower(*a) == lower(*b)) {
        a++;
        b++;
    }
    return lower(*a) == lower(*b);
}

/* ---- UTF-8 ---- */

/* The length of the character at s, 0 when the bytes are not UTF-8 (overlong forms, surrogates and
 * code points past U+10FFFF are not). */
static size_t character_at(const char *s, size_t length, int32_t *code)
{
    utf8proc_ssize_t most = length < 4 ? (utf8proc_ssize_t)length : 4;
    utf8proc_ssize_t n = utf8proc_iterate((const utf8proc_uint8_t *)s, most, code);
    return n > 0 ? (size_t)n : 0;
}

bool text_is_utf8(const char *s, size_t length)
{
    size_t i = 0;
    while (i < length) {
        if ((unsigned char)s[i] < 0x80) {
            i++;
            continue;
        }
        int32_t code = 0;
        size_t n = character_at(s + i, length - i, &code);
        if (n == 0)
            return false;
        i += n;
    }
    return true;
}

int text_width(const char *utf8)
{
    size_t length = strlen(utf8);
    int width = 0;
    size_t i = 0;
    while (i < length) {
        int32_t code = 0;
        size_t n = character_at(utf8 + i, length - i, &code);
        width += n == 0 ? 1 : utf8proc_charwidth(code);
        i += n == 0 ? 1 : n;
    }
    return width;
}

/* Control characters (C0, DEL, C1), the line separators, and the marks that turn the direction of
 * writing: Unicode Standard Annex 9, table 4, Bidi_Control. */
static bool draws_on_terminal(int32_t code)
{
    return code < 0x20 || (code >= 0x7f && code <= 0x9f) || code == 0x061c || code == 0x200e ||
           code == 0x200f || (code >= 0x2028 && code <= 0x202e) ||
           (code >= 0x2066 && code <= 0x2069);
}

void text_add_escaped(struct text *t, const char *s)
{
    size_t length = strlen(s);
    size_t i = 0;
    while (i < length) {
        int32_t code = 0;
        size_t n = character_at(s + i, length - i, &code);
        if (n > 0 && !draws_on_terminal(code)) {
            text_add_bytes(t, s + i, n);
            i += n;
            continue;
        }
        size_t end = i + (n == 0 ? 1 : n);
        for (; i < end; i++)
            text_print(t, "\\x%02X", (unsigned char)s[i]);
    }
}

/* ---- the nearest known word ---- */

enum {
    WORD_BYTES = 63,
    EDIT = WORD_BYTES + 1 /* one edit weighs more than any number of slips of case */
};

static int least(int a, int b)
{
    return a < b ? a : b;
}

static int letter_cost(char a, char b)
{
    if (a == b)
        return 0;
    return lower(a) == lower(b) ? 1 : EDIT;
}

/* Edit distance in the form of optimal string alignment: letters left out, put in, mistaken, and
 * neighbours swapped. EDIT for each, plus 1 for each slip of case, which decides between equals. */
static int word_distance(const char *a, size_t la, const char *b, size_t lb)
{
    int rows[3][WORD_BYTES + 1];
    int *before = rows[0];
    int *above = rows[1];
    int *row = rows[2];
    for (size_t j = 0; j <= lb; j++) {
        before[j] = 0;
        above[j] = (int)j * EDIT;
    }
    for (size_t i = 1; i <= la; i++) {
        row[0] = (int)i * EDIT;
        for (size_t j = 1; j <= lb; j++) {
            int best = least(above[j], row[j - 1]) + EDIT;
            best = least(best, above[j - 1] + letter_cost(a[i - 1], b[j - 1]));
            if (i > 1 && j > 1 && lower(a[i - 1]) == lower(b[j - 2]) &&
                lower(a[i - 2]) == lower(b[j - 1]))
                best = least(best, before[j - 2] + EDIT);
            row[j] = best;
        }
        int *spare = before;
        before = above;
        above = row;
        row = spare;
    }
    return above[lb];
}

const char *text_nearest(const char *word, const char *const *known, size_t count)
{
    size_t length = strlen(word);
    if (length == 0 || length > WORD_BYTES)
        return NULL;
    /* One edit in three letters: more, and the answer would be a guess. */
    int most = (int)length < 6 ? 1 : (int)length / 3;
    int best = (most + 1) * EDIT;
    const char *nearest = NULL;
    for (size_t i = 0; i < count; i++) {
        size_t other = strlen(known[i]);
        if (other > WORD_BYTES)
            continue;
        int distance = word_distance(word, length, known[i], other);
        /* A word with nothing left of it is not near. */
        if (distance < best && distance < (int)length * EDIT) {
            best = distance;
            nearest = known[i];
        }
    }
    return nearest;
}
