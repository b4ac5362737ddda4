/* mutations: files spoilt at random, from a seed. Whatever the bytes, the reader must come back
 * with a fault of one line, or with rows that were each handed over once; never with a crash or a
 * hang. Set WEIRBOOK_MUTATIONS to try more. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "support.h"

#include <stdlib.h>
#include <string.h>

enum { MUTATIONS = 1000, CHANGES_MOST = 6 };

static const char *const sound[] = {
    ("date,time,point,parameter,value,unit,sample,mdl,rl,note\n"
     "2025-03-04,08:00,EFF,TSS,<9.6,mg/L,composite,0.1,1.0,\"a, \"\"b\"\"\nc\"\n"
     "3/14/2025,7:30 PM,EFF,CU,ND,ug/L,,,,\n14/3/2025,,INF,FLOW,650621,kgal,,,,=x\n"
     "2025-03-05T07:30,,EFF,ECOLI,TNTC,MPN/100mL,,,2420,\n2025-03-06,,EFF,TSS,code 9,,,,,\n"),
    ("Datum;EFF TSS [mg/L];EFF FLOW;EFF CU\n04.03.2025;3,14;28.209,00;DNQ 0,5\n"
     "05.03.2025 07:30;<5,0;1.234;\xb5\n06.03.2025;;;E 3\n"),
    ("date\tEFF TSS\tEFF PH\r\n03/14/2025\t1,234\t7.1\r\n03/15/2025\t\"1,234.5\"\t\r\n"),
};

static const char *const sound_raw[] = {
    ("sheet,date,time,point,run,argument,value,unit\n"
     "suspended-solids,2025-03-04,08:00,EFF,1,dried,1.2345,g\n"
     "suspended-solids,2025-03-04,,,blank,dried,1.2001,\"g\"\n\n"
     "bod,2025-03-04,08:00,EFF,\"a, \"\"b\"\"\nc\",initial,8.41,\n"),
    ("\xef\xbb\xbfunit;value;argument;run;point;time;date;sheet\r\n"
     "\xc2\xb5g;1,2345;dried;1;EFF;08:00;2025-03-04;suspended-solids\r\n"
     ";12;colonies;2;EFF;;2025-03-04;membrane-filter\r\n"),
};

/* What does most harm to a reader of CSV, and a few bytes of anything. */
static const char harmful[] = "\"\"\",;\t\n\r' \x80\xc3\xff\x01<>=-0123456789.,/:EeDNQ";

static uint32_t next(uint32_t *seed)
{
    *seed = *seed * 1664525U + 1013904223U;
    return *seed >> 8;
}

static void spoil(struct text *t, uint32_t *seed)
{
    size_t at = next(seed) % t->length;
    char c = harmful[next(seed) % (sizeof harmful - 1)];
    switch (next(seed) % 4) {
    case 0:
        t->at[at] = c;
        break;
    case 1: /* put in */
        text_add_char(t, c);
        memmove(t->at + at + 1, t->at + at, t->length - 1 - at);
        t->at[at] = c;
        break;
    case 2: /* taken out */
        memmove(t->at + at, t->at + at + 1, t->length - at);
        t->length -= t->length > 1;
        break;
    default: /* cut off, now and then */
        if (next(seed) % 8 == 0 && at > 0)
            t->at[t->length = at] = '\0';
        break;
    }
}

static void spoilt_files_lose_no_row(void **state)
{
    struct scene *s = *state;
    const char *asked = getenv("WEIRBOOK_MUTATIONS");
    long usual = getenv("WEIRBOOK_ALL") != NULL ? 30L * MUTATIONS : MUTATIONS;
    long count = asked != NULL ? strtol(asked, NULL, 10) : usual;
    uint32_t seed = 4242;
    long rows = 0;
    struct text t;
    text_init(&t, 1 << 16);
    for (long i = 0; i < count; i++) {
        text_clear(&t);
        text_add(&t, sound[(size_t)i % NELEM(sound)]);
        for (uint32_t k = next(&seed) % CHANGES_MOST; k > 0 && t.length > 1; k--)
            spoil(&t, &seed);
        const char *path = scene_bytes(s, "spoilt.csv", t.at, t.length);
        scene_read_path(s, path, NULL, NULL); /* checks the counts, or the fault */
        rows += s->readings + s->asides;
        if (s->summary.rows > 0)
            assert_true(text_is_utf8(s->said.at, s->said.length));
    }
    assert_true(rows > count); /* most files are still read */
    print_message("%ld files, %ld rows\n", count, rows);
    text_free(&t);
}

static void a_spoilt_file_of_raw_values_is_read_whole_or_not_at_all(void **state)
{
    struct scene *s = *state;
    uint32_t seed = 2424;
    long read = 0;
    struct text t;
    text_init(&t, 1 << 16);
    for (long i = 0; i < MUTATIONS; i++) {
        struct raw_value *value = NULL;
        struct fault f = {.set = false};
        size_t count = 0;
        text_clear(&t);
        text_add(&t, sound_raw[(size_t)i % NELEM(sound_raw)]);
        for (uint32_t k = next(&seed) % CHANGES_MOST; k > 0 && t.length > 1; k--)
            spoil(&t, &seed);
        const char *path = scene_bytes(s, "spoilt-raw.csv", t.at, t.length);
        if (intake_raw(s->arena, path, &value, &count, &s->summary, &f) != OK) {
            assert_true(f.set && count == 0 && value == NULL && s->summary.rows == 0);
            assert_null(strchr(f.text, '\n'));
            continue;
        }
        read++;
        assert_true(count > 0 && s->summary.rows == (long)count);
        assert_int_equal(s->summary.bytes, t.length);
        for (size_t k = 0; k < count; k++)
            for (size_t c = 0; c < RAW_COLUMNS; c++)
                assert_true(text_is_utf8(value[k].cell[c], strlen(value[k].cell[c])));
    }
    assert_in_range(read, MUTATIONS / 10, MUTATIONS - MUTATIONS / 10);
    print_message("%d files, %ld read\n", MUTATIONS, read);
    text_free(&t);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(spoilt_files_lose_no_row),
        cmocka_unit_test(a_spoilt_file_of_raw_values_is_read_whole_or_not_at_all),
    };
    return cmocka_run_group_tests(tests, scene_setup, scene_teardown);
}
