/* process.csv against the catalogue. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <string.h>

#include "process/small.h"

#define BASE                                                                                       \
    {PLANT_FIELDS, "name,Small Works"}, {PLANT_POINTS, "EFF,Effluent,effluent,001"},               \
        {PLANT_PARAMETERS, "FLOW,Flow,MGD,3,mean,arithmetic,,,,,,"},                               \
        {PLANT_PARAMETERS, "FEED,Feed,lb/d,1,mean,arithmetic,,,,,,"},                              \
        {PLANT_BASINS, "CC1,contact,EFF,0.05,MG,,,,,,"},                                           \
    {                                                                                              \
        PLANT_LIMITS, "001,EFF,FLOW,flow,monthly-average,report,,MGD"                              \
    }

enum { BASE_ROWS = 6, OWN_ROWS = 3 };

static void rows_are_checked_against_the_catalogue(void **state)
{
    (void)state;
    static const struct {
        const char *rows[OWN_ROWS];
        const char *says; /* NULL: sound */
    } cases[] = {
        {{"dose,EFF,,chlorine-dose,feed,EFF FEED,", "dose,EFF,,chlorine-dose,flow,EFF FLOW,"},
         NULL},
        {{"stay,CC1,,detention-time,volume,basin CC1 volume,",
          "stay,CC1,,detention-time,flow,120,gpm"},
         NULL},
        {{"dose,EFF,,chlorine-dos,feed,EFF FEED,"},
         "process.csv:8: unknown formula 'chlorine-dos'; the nearest is 'chlorine-dose'"},
        {{"dose,EFF,,chlorine-dose,fed,EFF FEED,"},
         "process.csv:8: 'chlorine-dose' has no argument 'fed'; the nearest is 'feed'"},
        {{"dose,EFF,,chlorine-dose,feed,EFF FEED,", "dose,EFF,,chlorine-dose,flow,EFF FEED,"},
         "process.csv:9: the source of 'flow' is in lb/d, a unit of mass-rate, but 'flow' is a "
         "flow; take a source in MGD or its like"},
        {{"stay,CC1,,detention-time,volume,basin CC1 volume,",
          "stay,CC1,,detention-time,flow,120,gal"},
         "process.csv:9: the source of 'flow' is in gal"},
        {{"dose,EFF,,chlorine-dose,feed,EFF FEED,"},
         "process.csv:8: 'dose' at EFF has no source for 'flow'; add a row for it"},
        {{"mass-load,EFF,,chlorine-dose,feed,EFF FEED,"},
         "process.csv:8: the name 'mass-load' is that of another formula"},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct arena *a = arena_new();
        struct small_row rows[BASE_ROWS + OWN_ROWS] = {BASE};
        size_t count = BASE_ROWS;
        for (size_t k = 0; k < OWN_ROWS && cases[i].rows[k]; k++)
            rows[count++] = (struct small_row){PLANT_PROCESS, cases[i].rows[k]};
        struct plant *p = small_plant(a, rows, count);
        struct fault fault = {.set = false};
        enum status rc = process_check(p, &fault);
        if (cases[i].says == NULL && rc != OK)
            fail_msg("%s", fault.text);
        if (cases[i].says && (rc == OK || strstr(fault.text, cases[i].says) != fault.text))
            fail_msg("\"%s\" is not \"%s\"", fault.text, cases[i].says);
        arena_free(a);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(rows_are_checked_against_the_catalogue),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
