/* value: every token of a value, and what must be refused. The tokens are the project's own list
 * (weirbook-files(5)); codes are the no-data indicators of EPA's monitoring report form. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "intake/intake.h"

#include <string.h>

enum { POINT_MARK = false, COMMA_MARK = true };

static const struct {
    const char *text;
    bool comma;
    const char *mdl, *rl; /* of the row; "" none */
    const char *reads;    /* "qualifier number", "code X", or the reason */
} cases[] = {
    /* numbers; trailing zeros stay */
    {"12.5", POINT_MARK, "", "", "plain 12.5"},
    {"30.0", POINT_MARK, "", "", "plain 30.0"},
    {".19", POINT_MARK, "", "", "plain 0.19"},
    {"0", POINT_MARK, "", "", "plain 0"},
    {"-0", POINT_MARK, "", "", "plain 0"},
    {" 7 ", POINT_MARK, "", "", "not-a-number"}, /* the reader of cells trims, not the value */
    {"1.2E3", POINT_MARK, "", "", "plain 1200"},
    {"123456789012345678", POINT_MARK, "", "", "plain 123456789012345678"},
    {"1234567890123456789", POINT_MARK, "", "", "too-many-digits"},
    {"3.1415926535897932384626", POINT_MARK, "", "", "too-many-digits"},
    {"1O.2", POINT_MARK, "", "", "not-a-number"},
    {"about 3", POINT_MARK, "", "", "not-a-number"},
    {"=2+1", POINT_MARK, "", "", "not-a-number"},
    {"1,5", POINT_MARK, "", "", "not-a-number"},
    {"1 500", POINT_MARK, "", "", "not-a-number"},
    {"12.5 mg/L", POINT_MARK, "", "", "not-a-number"},
    {"nan", POINT_MARK, "", "", "not-a-number"},
    {"inf", POINT_MARK, "", "", "not-a-number"},
    {"0x1F", POINT_MARK, "", "", "not-a-number"},
    {"-", POINT_MARK, "", "", "not-a-number"},
    {"", POINT_MARK, "", "", "blank-value"},
    {"  ", POINT_MARK, "", "", "blank-value"},
    {"-3.1", POINT_MARK, "", "", "negative-value"},
    {"\xe2\x88\x92"
     "3.1",
     POINT_MARK, "", "", "negative-value"},
    /* less and greater */
    {"<2", POINT_MARK, "", "", "less 2"},
    {"< 2.0", POINT_MARK, "", "", "less 2.0"},
    {"<=2", POINT_MARK, "", "", "less 2"},
    {"<= 2", POINT_MARK, "", "", "less 2"},
    {"\xe2\x89\xa4"
     "2",
     POINT_MARK, "", "", "less 2"},
    {">2420", POINT_MARK, "", "", "greater 2420"},
    {">=2419.6", POINT_MARK, "", "", "greater 2419.6"},
    {"\xe2\x89\xa5 2", POINT_MARK, "", "", "greater 2"},
    {"<", POINT_MARK, "", "", "not-a-number"},
    {"<<2", POINT_MARK, "", "", "not-a-number"},
    {"<ND", POINT_MARK, "", "", "not-a-number"},
    {"<-1", POINT_MARK, "", "", "negative-value"},
    /* not detected: mdl, else rl (rules page, R14), of the row before the parameter's */
    {"ND", POINT_MARK, "0.2", "1.0", "less 0.2"},
    {"nd", POINT_MARK, "", "1.0", "less 1.0"},
    {"ND", POINT_MARK, "", "", "less 0.5"}, /* the parameter's mdl */
    {"ND 3", POINT_MARK, "0.2", "", "not-a-number"},
    /* detected, not quantified; alone it stands for the rl (rules page, G17) */
    {"DNQ 0.4", POINT_MARK, "", "", "dnq 0.4"},
    {"dnq0.4", POINT_MARK, "", "", "dnq 0.4"},
    {"DNQ", POINT_MARK, "0.2", "1.0", "dnq-bare 1.0"},
    {"DNQ", POINT_MARK, "", "", "dnq-bare 4.0"}, /* the parameter's rl */
    {"DNQ about 1", POINT_MARK, "", "", "not-a-number"},
    /* too numerous to count: above the rl (rules page, R15) */
    {"TNTC", POINT_MARK, "", "60", "greater 60"},
    {"tntc", POINT_MARK, "5", "", "greater 4.0"},
    /* estimated */
    {"E 12", POINT_MARK, "", "", "estimated 12"},
    {"E12.0", POINT_MARK, "", "", "estimated 12.0"},
    {"e 3", POINT_MARK, "", "", "estimated 3"},
    {"E -3", POINT_MARK, "", "", "negative-value"},
    {"EE 3", POINT_MARK, "", "", "not-a-number"},
    /* no-data codes: letters alone, digits after the word */
    {"C", POINT_MARK, "", "", "code C"},
    {"c", POINT_MARK, "", "", "code C"},
    {"E", POINT_MARK, "", "", "code E"},
    {"G", POINT_MARK, "", "", "code G"},
    {"code 9", POINT_MARK, "", "", "code 9"},
    {"CODE 5", POINT_MARK, "", "", "code 5"},
    {"code E", POINT_MARK, "", "", "code E"},
    {"9", POINT_MARK, "", "", "plain 9"},
    {"Z", POINT_MARK, "", "", "not-a-number"},
    {"code 3", POINT_MARK, "", "", "not-a-number"},
    {"code", POINT_MARK, "", "", "not-a-number"},
    {"CC", POINT_MARK, "", "", "not-a-number"},
    {"B", POINT_MARK, "", "", "code-without-number"},
    {"Q", POINT_MARK, "", "", "code-without-number"},
    {"code B", POINT_MARK, "", "", "code-without-number"},
    /* decimal comma */
    {"3,14", COMMA_MARK, "", "", "plain 3.14"},
    {"<5,0", COMMA_MARK, "", "", "less 5.0"},
    {"DNQ 3,2", COMMA_MARK, "", "", "dnq 3.2"},
    {"5", COMMA_MARK, "", "", "plain 5"},
    {"3.14", COMMA_MARK, "", "", "not-a-number"},
    {"1.234,5", COMMA_MARK, "", "", "not-a-number"},
    {"1,234,5", COMMA_MARK, "", "", "not-a-number"},
};

static bool limit(const char *text, struct decimal *out)
{
    return *text != '\0' && decimal_parse(text, strlen(text), out) == DECIMAL_FINE;
}

static void tell(const struct reading *r, enum reason reason, char *out, size_t size)
{
    char number[24];
    if (reason != REASON_COUNT) {
        snprintf(out, size, "%s", reason_words[reason]);
    } else if (r->qualifier == QUALIFIER_CODE) {
        snprintf(out, size, "code %c", r->code);
    } else {
        decimal_write(r->value, number);
        snprintf(out, size, "%s %s", qualifier_words[r->qualifier], number);
    }
}

static struct parameter copper(void)
{
    struct parameter p = {.id = "CU", .unit = unit_find("ug/L")};
    p.mdl = (struct optional){true, {5, 1}};
    p.rl = (struct optional){true, {40, 1}};
    return p;
}

static void every_token_reads_as_listed(void **state)
{
    (void)state;
    const struct parameter p = copper();
    for (size_t i = 0; i < NELEM(cases); i++) {
        char told[64];
        struct reading r = {.unit = (uint16_t)unit_index(p.unit)};
        r.has_mdl = limit(cases[i].mdl, &r.mdl);
        r.has_rl = limit(cases[i].rl, &r.rl);
        tell(&r, intake_value(&r, &p, cases[i].text, cases[i].comma), told, sizeof told);
        if (strcmp(told, cases[i].reads) != 0)
            fail_msg("'%s' reads as '%s', not '%s'", cases[i].text, told, cases[i].reads);
    }
}

static void the_value_is_kept_as_written(void **state)
{
    (void)state;
    const struct parameter p = copper();
    struct reading r = {.unit = (uint16_t)unit_index(p.unit)};
    assert_int_equal(intake_value(&r, &p, "<=2.50", false), REASON_COUNT);
    assert_string_equal(r.text, "<=2.50");
}

static void a_result_without_any_limit_is_refused(void **state)
{
    (void)state;
    static const char *const words[] = {"ND", "TNTC", "DNQ"};
    const struct parameter p = {.id = "TURB", .unit = unit_find("NTU")};
    for (size_t i = 0; i < NELEM(words); i++) {
        struct reading r = {.unit = (uint16_t)unit_index(p.unit)};
        assert_int_equal(intake_value(&r, &p, words[i], false), REASON_NO_LIMIT_FOR_ND);
    }
    /* TNTC is above the rl; an mdl says nothing of it. */
    struct reading r = {.unit = (uint16_t)unit_index(p.unit), .has_mdl = true, .mdl = {1, 0}};
    assert_int_equal(intake_value(&r, &p, "TNTC", false), REASON_NO_LIMIT_FOR_ND);
}

static void the_parameters_limit_is_turned_into_the_unit_of_the_row(void **state)
{
    (void)state;
    const struct parameter p = copper();
    struct reading r = {.unit = (uint16_t)unit_index(unit_find("mg/L"))};
    char number[24];
    assert_int_equal(intake_value(&r, &p, "ND", false), REASON_COUNT);
    decimal_write(r.value, number);
    assert_string_equal(number, "0.0005"); /* 0.5 ug/L; 1000 ug in a mg */
}

static void only_a_temperature_may_be_below_zero(void **state)
{
    (void)state;
    const struct parameter p = {.id = "TEMP", .unit = unit_find("degC")};
    struct reading r = {.unit = (uint16_t)unit_index(p.unit)};
    assert_int_equal(intake_value(&r, &p, "-1.5", false), REASON_COUNT);
    assert_int_equal(r.value.coefficient, -15);
    assert_int_equal(intake_value(&r, &p,
                                  "\xe2\x88\x92"
                                  "1,5",
                                  true),
                     REASON_COUNT);
    assert_int_equal(r.value.coefficient, -15);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_token_reads_as_listed),
        cmocka_unit_test(the_value_is_kept_as_written),
        cmocka_unit_test(a_result_without_any_limit_is_refused),
        cmocka_unit_test(the_parameters_limit_is_turned_into_the_unit_of_the_row),
        cmocka_unit_test(only_a_temperature_may_be_below_zero),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
