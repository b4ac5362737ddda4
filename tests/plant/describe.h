/* describe: plants for the tests of this room, from rows written as text. A row is a line of cells
 * parted by commas in the order of the layout; a cell in double quotes may hold commas. */
#ifndef WEIRBOOK_TESTS_DESCRIBE_H
#define WEIRBOOK_TESTS_DESCRIBE_H

#include "plant/plant.h"

#define LINE_BYTES 1024

/* Cuts a line into cells, in place; returns how many there are. */
static inline int cut(char *line, const char *cells[PLANT_COLUMNS_MOST])
{
    int count = 0;

    for (char *s = line; count < PLANT_COLUMNS_MOST;) {
        char *w = s;
        bool quoted = *s == '"', more;

        cells[count++] = w;
        if (quoted)
            s++;
        for (; *s != '\0' && *s != (quoted ? '"' : ','); s++)
            *w++ = *s;
        if (quoted && *s == '"')
            s++;
        more = *s == ',';
        *w = '\0';
        if (!more)
            break;
        s++;
    }
    return count;
}

/* Adds the lines of `text`; the first is line `first`. Blank cells count as absent ones do. */
static inline void add_rows(struct plant_draft *d, enum plant_file file, bool builtin, long first,
                            const char *text)
{
    char line[LINE_BYTES];

    for (const char *s = text; *s != '\0'; first++) {
        struct plant_row row = {.file = file, .name = plant_layout(file)->file, .line = first};
        size_t length = 0;
        int count;

        for (; *s != '\0' && *s != '\n'; s++)
            if (length < sizeof line - 1)
                line[length++] = *s;
        line[length] = '\0';
        if (*s == '\n')
            s++;
        row.builtin = builtin;
        count = cut(line, row.cell);
        for (int i = 0; i < count; i++)
            row.at[i] = i + 1;
        plant_draft_add(d, &row);
    }
}

/* A small catalogue and a small plant without faults; a test adds its own rows from `NEXT` on. */
static const char *const small_catalogue =
    "FLOW,Flow,MGD,3,mean,arithmetic,50050,0,1000,,,\n"
    "BOD5,Biochemical oxygen demand,mg/L,1,mean,arithmetic,00310,0,20000,,,\n"
    "TSS,Total suspended solids,mg/L,1,mean,arithmetic,00530,0,100000,,,\n"
    "NH3N,Ammonia as N,mg/L,2,mean,arithmetic,00610,0,5000,,,\n"
    "NO3N,Nitrate as N,mg/L,2,mean,arithmetic,00620,0,5000,,,\n"
    "PH,pH,pH,1,mean,arithmetic,00400,0,14,,,\n"
    "TEMP,Temperature,degC,1,mean,arithmetic,00010,-5,60,,,\n"
    "ECOLI,E. coli,MPN/100mL,0,geometric,geometric,51040,0,1000000000,,,\n"
    "EXCURSION,Time beyond the range,min,0,sum,arithmetic,,0,1440,,,\n"
    "ZN,Zinc,ug/L,1,mean,arithmetic,01092,0.5,50000,,,\n";

#define NEXT 20 /* the line of a test's own row */

static inline struct plant_draft *small_plant(struct arena *a)
{
    struct plant_draft *d = plant_draft_new(a);

    add_rows(d, PLANT_PARAMETERS, true, 2, small_catalogue);
    add_rows(d, PLANT_FIELDS, false, 2, "name,Marrow Bend\npermit,XX0000000\nunits,us");
    add_rows(d, PLANT_POINTS, false, 2,
             "INF,Raw influent,influent,\nEFF,Final effluent,effluent,001\n"
             "EF2,Second effluent,effluent,002\nRAS,Return sludge,return-sludge,");
    add_rows(d, PLANT_BASINS, false, 2,
             "AB1,aeration,,0.5,MG,3200,ft2,,,,2024-12-31\nSC1,secondary-clarifier,,,,5027,ft2,"
             "251,ft,,");
    add_rows(d, PLANT_LIMITS, false, 2,
             "001,EFF,BOD5,concentration,monthly-average,max,30,mg/L,,,2024-12-31\n"
             "001,EFF,NH3N,concentration,monthly-average,max,2.0,mg/L,05-01..10-31\n"
             "001,EFF,PH,concentration,instantaneous,min,6.0,pH\n"
             "001,EFF,PH,concentration,instantaneous,max,9.0,pH");
    add_rows(d, PLANT_METERS, false, 2, "EFF,FLOW,totalizer,1000000,,,2024-12-31");
    add_rows(d, PLANT_PROCESS, false, 2,
             "load-in,INF,BOD5,mass-load,flow,INF FLOW,\nload-in,INF,BOD5,mass-load,concentration,"
             "INF BOD5,mg/L");
    return d;
}

#endif
