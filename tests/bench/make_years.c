/* make_years: the benchmark's plant and its readings, the same every time: ROWS rows over ten years
 * and a hundred series, in the order of their dates. make_years FOLDER ROWS writes FOLDER/plant/ (a
 * description), FOLDER/years.csv and FOLDER/next-month.csv. */
#include <inttypes.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>

#define COUNT(a) (sizeof(a) / sizeof((a)[0]))

struct measure {
    const char *parameter, *unit, *method;
    int low, high, tenths; /* of values; tenths: written with one decimal */
};

static const struct measure measures[] = {
    {"BOD5", "mg/L", "SM 5210 B", 2, 40, 1},       {"TSS", "mg/L", "SM 2540 D", 2, 60, 1},
    {"NH3N", "mg/L", "SM 4500-NH3", 1, 20, 1},     {"TP", "mg/L", "SM 4500-P", 1, 6, 1},
    {"COD", "mg/L", "SM 5220 D", 20, 120, 0},      {"PH", "pH", "SM 4500-H", 6, 8, 1},
    {"DO", "mg/L", "SM 4500-O", 4, 10, 1},         {"TEMP", "degC", "SM 2550", 8, 25, 1},
    {"ECOLI", "MPN/100mL", "Colilert", 1, 300, 0}, {"NO3N", "mg/L", "EPA 300.0", 1, 20, 1},
};
static const char *const points[] = {"EFF", "INF", "PE", "AER1", "AER2",
                                     "RAS", "WAS", "UP", "DOWN", "EF2"};
static const char *const analysts[] = {"bench", "night", "contract"};

static uint64_t seed = 20250401;

static unsigned next(unsigned below)
{
    seed ^= seed << 13;
    seed ^= seed >> 7;
    seed ^= seed << 17;
    return (unsigned)(seed >> 33) % below;
}

static int days_of(int year, int month)
{
    static const int days[] = {31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31};
    return days[month - 1] + (month == 2 && year % 4 == 0);
}

static FILE *opened(const char *folder, const char *name)
{
    char path[1000];
    snprintf(path, sizeof path, "%s/%s", folder, name);
    FILE *f = fopen(path, "w");
    if (!f) {
        perror(path);
        exit(1);
    }
    return f;
}

static void closed(FILE *f)
{
    if (fclose(f) != 0) {
        perror("writing");
        exit(1);
    }
}

static void write_row(FILE *f, int year, int month, int date, long i)
{
    const struct measure *m = &measures[i % 10];
    const char *point = points[i / 10 % 10];
    unsigned value = (unsigned)m->low * 10 + next((unsigned)(m->high - m->low) * 10);
    fprintf(f, "%04d-%02d-%02d,%02ld:00,%s,%s,", year, month, date, i / 100 % 24, point,
            m->parameter);
    if (m->tenths)
        fprintf(f, "%u.%u", value / 10, value % 10);
    else
        fprintf(f, "%u", value / 10);
    fprintf(f, ",%s,%s,%s,%s\n", m->unit, i / 100 % 2 ? "grab" : "", m->method, analysts[i % 3]);
}

/* Each day gets its even share of the rows: every series once, then again at the next hour. */
static void write_days(FILE *f, int year, int month, long *day, long days, long rows)
{
    for (int date = 1; date <= days_of(year, month); date++, ++*day) {
        long count = (*day + 1) * rows / days - *day * rows / days;
        for (long i = 0; i < count; i++)
            write_row(f, year, month, date, i);
    }
}

static void write_readings(const char *folder, long rows)
{
    FILE *f = opened(folder, "years.csv");
    long day = 0, days = 3653; /* 2015-01-01 to 2024-12-31 */
    fprintf(f, "date,time,point,parameter,value,unit,sample,method,analyst\n");
    for (int year = 2015; year <= 2024; year++)
        for (int month = 1; month <= 12; month++)
            write_days(f, year, month, &day, days, rows);
    closed(f);
    f = opened(folder, "next-month.csv");
    fprintf(f, "date,time,point,parameter,value,unit,sample,method,analyst\n");
    day = 0;
    write_days(f, 2025, 1, &day, 31, 1100);
    closed(f);
}

static void write_plant(const char *folder)
{
    char path[900];
    snprintf(path, sizeof path, "%s/plant", folder);
    mkdir(path, 0777);
    FILE *f = opened(path, "plant.csv");
    fprintf(f, "field,value\nname,Ten years\npermit,XX0000000\nunits,us\n");
    closed(f);
    f = opened(path, "points.csv");
    fprintf(f, "point,name,role,outfall\n");
    for (size_t i = 0; i < COUNT(points); i++)
        fprintf(f, "%s,Point %zu,%s,%s\n", points[i], i + 1,
                i == 0 || i == 9 ? "effluent" : "other",
                i == 0   ? "001"
                : i == 9 ? "002"
                         : "");
    closed(f);
    f = opened(path, "limits.csv");
    fprintf(f, "outfall,point,parameter,basis,statistic,bound,limit,unit,samples\n");
    for (int i = 0; i < 2; i++) {
        const char *outfall = i ? "002,EF2" : "001,EFF";
        static const char *const averaged[] = {"BOD5", "TSS", "NH3N", "TP", "COD"};
        for (size_t p = 0; p < COUNT(averaged); p++)
            fprintf(f,
                    "%s,%s,concentration,monthly-average,max,30,mg/L,3/"
                    "week\n%s,%s,concentration,weekly-average,max,45,mg/L,\n",
                    outfall, averaged[p], outfall, averaged[p]);
        fprintf(f, "%s,PH,concentration,daily,min,6.0,pH,\n%s,PH,concentration,daily,max,9.0,pH,\n",
                outfall, outfall);
        fprintf(f, "%s,ECOLI,concentration,monthly-geomean,max,126,MPN/100mL,\n", outfall);
    }
    closed(f);
}

int main(int argc, char **argv)
{
    if (argc != 3) {
        fprintf(stderr, "usage: make_years FOLDER ROWS\n");
        return 2;
    }
    write_plant(argv[1]);
    write_readings(argv[1], strtol(argv[2], NULL, 10));
    return 0;
}
