/* Bit flips: of seeded single-bit flips in a book's file, all that change anything the program
 * reads out of it are noticed, by the reading itself or by the check. A sample by default; 1,000
 * with WEIRBOOK_ALL set, or as many as WEIRBOOK_FLIPS says. */
#include "book/books.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#define THIS ((struct shelf *)*state)

static long flips_wanted(void)
{
    const char *said = getenv("WEIRBOOK_FLIPS");
    return said ? strtol(said, NULL, 10) : getenv("WEIRBOOK_ALL") ? 1000 : 150;
}

/* Weights of solids: four runs with their results, a blank and one that gives none. */
static void fill_bench(struct shelf *s)
{
    struct text lines;
    text_init(&lines, 1 << 20);
    for (int i = 0; i < 6; i++)
        for (int k = 0; k < 4; k++)
            text_print(&lines, "raw: suspended-solids 2025-03-%02d 08:%02d %s %s %s %d.%04d g\n",
                       20 + i, i, i % 5 ? "EFF" : "-", i % 5 ? "1" : "blank",
                       k == 0   ? "tare"
                       : k == 1 ? "dried"
                       : k == 2 ? "ignited"
                                : "volume",
                       1 + i, 1234 + 77 * k);
    for (int i = 1; i < 5; i++)
        text_print(&lines, "EFF TSS 2025-03-%02d %d mg/L @08:%02d note:duplicate\n", 20 + i, 9 + i,
                   i);
    shelf_bench(s, "bench.csv", lines.at);
    text_free(&lines);
}

/* A book of a few hundred readings, small enough that most of its bytes say something. */
static void fill(struct shelf *s)
{
    struct text lines;
    text_init(&lines, 1 << 20);
    for (int i = 0; i < 300; i++)
        text_print(&lines, "%s %s 2025-%02d-%02d %s%d.%d mg/L @%02d:15 note:n%d\n",
                   i % 2 ? "EFF" : "INF", i % 3 ? "BOD5" : "TSS", 1 + i / 28, 1 + i % 28,
                   i % 7 ? "" : "<", 2 + i * 37 % 250, i % 10, i % 24, i % 40);
    shelf_load(s, "a.csv", NULL, lines.at);
    text_clear(&lines);
    for (int i = 0; i < 100; i++)
        text_print(&lines, "EFF BOD5 2025-%02d-%02d %d mg/L @%02d:15\n", 1 + i / 28, 1 + i % 28, i,
                   i % 24);
    shelf_load(s, "b.csv", "second look", lines.at);
    text_clear(&lines);
    for (int i = 0; i < 60; i++)
        text_print(&lines, "aside:not-a-number 2025-03-%02d - EFF BOD5 1O%d mg/L\n", 1 + i % 28, i);
    shelf_load(s, "c.csv", NULL, lines.at);
    fill_bench(s);
    text_free(&lines);
}

static uint64_t next(uint64_t *seed)
{
    *seed ^= *seed << 13;
    *seed ^= *seed >> 7;
    *seed ^= *seed << 17;
    return *seed;
}

static void every_flip_that_changes_what_is_read_is_noticed(void **state)
{
    struct shelf *s = THIS;
    struct fault f = {0};
    size_t length;
    uint64_t seed = 20250401;
    long flips = flips_wanted(), changed = 0, refused = 0, found = 0, unread = 0;
    fill(s);
    const char *before = shelf_told(s, &f);
    assert_non_null(before);
    assert_string_equal(shelf_check(s), "");
    uint8_t *bytes = file_bytes(s->arena, s->path, &length);
    struct arena *kept = s->arena;
    for (long i = 0; i < flips; i++) {
        uint64_t at = next(&seed) % (length * 8);
        bytes[at / 8] ^= (uint8_t)(1U << at % 8);
        file_write(s->path, bytes, length);
        bytes[at / 8] ^= (uint8_t)(1U << at % 8);
        s->arena = arena_new(); /* what one flip needs goes with it */
        const char *told = shelf_told(s, &f);
        bool differs = !told || strcmp(told, before) != 0;
        bool noticed = *shelf_check(s) != '\0';
        if (differs && told && !noticed)
            fail_msg("bit %d of byte %ld of the file changes what is read, and nobody notices",
                     (int)(at % 8), (long)(at / 8));
        if (!told && !noticed)
            fail_msg("byte %ld: '%s', and the check finds nothing", (long)(at / 8), f.text);
        changed += differs;
        refused += !told;
        found += noticed;
        unread += noticed && !differs;
        arena_free(s->arena);
        s->arena = kept;
    }
    print_message("%ld flips in %ld bytes: %ld change what is read (%ld of them refused by "
                  "reading), all noticed; the check "
                  "finds %ld, %ld of them in bytes that are not read\n",
                  flips, (long)length, changed, refused, found, unread);
    assert_true(changed > flips / 20);
}

/* Where a run of bytes stands in others; the length of those when nowhere. */
static size_t place_of(const uint8_t *in, size_t length, const char *what)
{
    size_t at = 0, size = strlen(what);
    while (at + size <= length && memcmp(in + at, what, size) != 0)
        at++;
    return at + size <= length ? at : length;
}

/* Every bit of a raw value: its cells stand one after another, its lengths before them and its mark
 * behind. */
static void every_bit_of_a_raw_value_is_watched(void **state)
{
    static const char cells[] = "suspended-solids2025-03-2108:01EFF1dried2.1311g";
    enum {
        LENGTHS = 13,
        MARK = 8
    }; /* the byte before says nothing: the row's number is
          its key */
    struct shelf *s = THIS;
    struct fault f = {0};
    size_t length;
    long told_nothing = 0, flips = 0;
    fill_bench(s);
    const char *before = shelf_told(s, &f);
    uint8_t *bytes = file_bytes(s->arena, s->path, &length);
    size_t at = place_of(bytes, length, cells);
    assert_true(at > LENGTHS && at + sizeof cells + MARK < length);
    struct arena *kept = s->arena;
    size_t first = (at - LENGTHS) * 8, last = (at + sizeof cells - 1 + MARK) * 8;
    for (size_t bit = first; bit < last; bit += getenv("WEIRBOOK_ALL") ? 1 : 3, flips++) {
        bytes[bit / 8] ^= (uint8_t)(1U << bit % 8);
        file_write(s->path, bytes, length);
        bytes[bit / 8] ^= (uint8_t)(1U << bit % 8);
        s->arena = arena_new();
        const char *told = shelf_told(s, &f);
        if (*shelf_check(s) == '\0')
            fail_msg("bit %d of byte %ld is not watched", (int)(bit % 8), (long)(bit / 8));
        if (told)
            assert_string_equal(told, before); /* nothing false is handed over */
        told_nothing += !told;
        arena_free(s->arena);
        s->arena = kept;
    }
    print_message("%ld flips, all noticed; %ld of them refused by reading\n", flips, told_nothing);
    assert_true(told_nothing > flips / 2);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test_setup_teardown(every_flip_that_changes_what_is_read_is_noticed,
                                        shelf_setup, shelf_teardown),
        cmocka_unit_test_setup_teardown(every_bit_of_a_raw_value_is_watched, shelf_setup,
                                        shelf_teardown),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
