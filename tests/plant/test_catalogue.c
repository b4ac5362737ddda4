/* catalogue: the built-in parameters of schema/parameters.csv are read without a problem and hold
 * what the project promises. Codes are those of the EPA's parameter list (public facts). */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "describe.h"

#include <stdio.h>
#include <string.h>

#define CATALOGUE_BYTES 65536

/* The file stands beside the tests, wherever the two are checked out. */
static char *catalogue_text(struct arena *a)
{
    const char *here = __FILE__, *end = strstr(here, "tests/plant/");
    char *text = arena_alloc(a, CATALOGUE_BYTES);
    FILE *file;
    size_t length;

    if (!end)
        fail_msg("cannot tell where the checkout is from %s", here);
    file = fopen(arena_print(a, "%.*sschema/parameters.csv", (int)(end - here), here), "r");
    if (!file)
        fail_msg("cannot open schema/parameters.csv");
    length = fread(text, 1, CATALOGUE_BYTES - 1, file);
    assert_true(length > 0 && length < CATALOGUE_BYTES - 1);
    fclose(file);
    return text;
}

static struct plant *catalogue(struct arena *a)
{
    struct plant_draft *d = plant_draft_new(a);
    char *text = catalogue_text(a), *rows = strchr(text, '\n');
    struct plant *p = NULL;
    struct fault f = {0};

    assert_non_null(rows);
    *rows++ = '\0';
    assert_string_equal(text, "parameter,name,unit,decimals,day_rule,average,code,low,high,mdl,rl,"
                              "rules");
    add_rows(d, PLANT_PARAMETERS, true, 2, rows);
    add_rows(d, PLANT_FIELDS, false, 2, "name,Marrow Bend");
    add_rows(d, PLANT_POINTS, false, 2, "EFF,,effluent,001");
    if (plant_draft_finish(d, &p, &f) != OK)
        fail_msg("%s", f.text);
    return p;
}

static const struct {
    const char *id, *unit, *code;
} expected[] = {
    {"FLOW", "MGD", "50050"},
    {"BOD5", "mg/L", "00310"},
    {"CBOD5", "mg/L", "80082"},
    {"COD", "mg/L", "00340"},
    {"TSS", "mg/L", "00530"},
    {"VSS", "mg/L", "00535"},
    {"MLSS", "mg/L", ""},
    {"MLVSS", "mg/L", ""},
    {"SV30", "mL/L", ""},
    {"SETTLEABLE", "mL/L", "00545"},
    {"NH3N", "mg/L", "00610"},
    {"NO2N", "mg/L", "00615"},
    {"NO3N", "mg/L", "00620"},
    {"TKN", "mg/L", "00625"},
    {"TN", "mg/L", "00600"},
    {"TP", "mg/L", "00665"},
    {"PO4P", "mg/L", "70507"},
    {"PH", "pH", "00400"},
    {"DO", "mg/L", "00300"},
    {"TEMP", "degC", "00010"},
    {"ALK", "mg/L", "00410"},
    {"TRC", "mg/L", "50060"},
    {"FRC", "mg/L", "50064"},
    {"ECOLI", "MPN/100mL", "51040"},
    {"FCOLI", "cfu/100mL", "74055"},
    {"ENTERO", "/100mL", "61211"},
    {"TURB", "NTU", "00076"},
    {"OG", "mg/L", "00556"},
    {"COND", "uS/cm", "00094"},
    {"BLANKET", "ft", ""},
    {"AIR", "ft3/d", ""},
    {"FEED", "lb/d", ""},
    {"TS", "%", ""},
    {"VS", "%", ""},
    {"RAIN", "in", "46529"},
};

static void the_promised_parameters_are_there(void **state)
{
    struct arena *a = arena_new();
    struct plant *p = catalogue(a);

    (void)state;
    for (size_t i = 0; i < NELEM(expected); i++) {
        int at = plant_parameter(p, expected[i].id);

        if (at < 0)
            fail_msg("no %s in the catalogue", expected[i].id);
        assert_string_equal(p->parameters[at].unit->name, expected[i].unit);
        assert_string_equal(p->parameters[at].code, expected[i].code);
    }
    arena_free(a);
}

static void every_parameter_is_whole(void **state)
{
    struct arena *a = arena_new();
    struct plant *p = catalogue(a);

    (void)state;
    for (size_t i = 0; i < p->parameter_count; i++) {
        const struct parameter *q = &p->parameters[i];

        assert_true(q->builtin);
        assert_non_null(q->unit);
        assert_true(strlen(q->name) > 0);
        assert_true(q->low.set && q->high.set);
        assert_true(decimal_compare(q->low.value, q->high.value) < 0);
        for (size_t j = 0; j < i; j++) /* a code stands for one parameter */
            assert_true(*q->code == '\0' || !text_equal(q->code, p->parameters[j].code));
    }
    arena_free(a);
}

/* Bacteria are averaged geometrically: general instructions of EPA form 3320-1. */
static void bacteria_and_only_they_have_geometric_means(void **state)
{
    struct arena *a = arena_new();
    struct plant *p = catalogue(a);

    (void)state;
    for (size_t i = 0; i < p->parameter_count; i++) {
        const struct parameter *q = &p->parameters[i];
        bool bacteria = text_equal(q->unit->kind, "bacteria");

        assert_int_equal(q->average, bacteria ? AVERAGE_GEOMETRIC : AVERAGE_ARITHMETIC);
        assert_int_equal(q->day_rule == DAY_GEOMETRIC, bacteria);
    }
    arena_free(a);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(the_promised_parameters_are_there),
        cmocka_unit_test(every_parameter_is_whole),
        cmocka_unit_test(bacteria_and_only_they_have_geometric_means),
    };

    return cmocka_run_group_tests(tests, NULL, NULL);
}
