/* make_years: the benchmark's plants and their readings, the same every time: ROWS rows over ten
 * years (or YEARS, to the end of 2024) and a hundred series, in the order of their dates.
 * make_years FOLDER ROWS [YEARS] writes FOLDER/plant/ (a description), FOLDER/years.csv and
 * FOLDER/next-month.csv; and of a plant with basins, which has what the process table asks for,
 * FOLDER/works/ and FOLDER/works.csv: a hundred series with one reading a day. */
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
    {"BOD5", "mg/L", "SM 5210 B", 2, 40, 1},        {"TSS", "mg/L", "SM 2540 D", 2, 60, 1},
    {"NH3N", "mg/L", "SM 4500-NH3", 1, 20, 1},      {"TP", "mg/L", "SM 4500-P", 1, 6, 1},
    {"COD", "mg/L", "SM 5220 D", 20, 120, 0},       {"PH", "pH", "SM 4500-H", 6, 8, 1},
    {"DO", "mg/L", "SM 4500-O", 4, 10, 1},          {"TEMP", "degC", "SM 2550", 8, 25, 1},
    {"ECOLI", "MPN/100mL", "SM 9223 B", 1, 300, 0}, {"NO3N", "mg/L", "EPA 300.0", 1, 20, 1},
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

static void write_readings(const char *folder, long rows, int years)
{
    FILE *f = opened(folder, "years.csv");
    long day = 0, days = 0;
    for (int year = 2025 - years; year <= 2024; year++)
        days += year % 4 == 0 ? 366 : 365;
    fprintf(f, "date,time,point,parameter,value,unit,sample,method,analyst\n");
    for (int year = 2025 - years; year <= 2024; year++)
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

/* ---- a plant with basins ---- */

struct sampled {
    const char *point, *parameters; /* words, one space between */
};

static const struct sampled works[] = {
    {"INF", "FLOW BOD5 TSS COD TKN NH3N TP PH TEMP ALK"},
    {"PE", "BOD5 TSS COD TKN NH3N TP PH ALK"},
    {"AER1", "MLSS MLVSS SV30 DO TEMP PH OUR"},
    {"AER2", "MLSS MLVSS SV30 DO TEMP PH OUR"},
    {"AER3", "MLSS MLVSS SV30 DO TEMP PH OUR"},
    {"AER4", "MLSS MLVSS SV30 DO TEMP PH OUR"},
    {"RAS", "FLOW TSS"},
    {"WAS", "FLOW TSS"},
    {"SE", "BOD5 TSS COD TKN NH3N NO3N NO2N TP PH TEMP TURB"},
    {"EFF", "FLOW BOD5 TSS COD TKN NH3N NO3N NO2N TP PH TEMP DO ECOLI"},
    {"UP", "DO PH TEMP NH3N TURB COND"},
    {"DOWN", "DO PH TEMP NH3N TURB COND"},
    {"C1", "BLANKET TURB"},
    {"C2", "BLANKET TURB"},
    {"DIG", "VA ALK PH TEMP"},
    {"YARD", "RAIN ENERGY AIR GRIT SCREENINGS COND"},
};

static const struct {
    const char *parameter, *unit;
    int low, high, decimals; /* of values */
} ranges[] = {
    {"FLOW", "MGD", 2, 6, 3},
    {"BOD5", "mg/L", 5, 250, 1},
    {"TSS", "mg/L", 5, 250, 1},
    {"COD", "mg/L", 20, 500, 0},
    {"TKN", "mg/L", 5, 40, 1},
    {"NH3N", "mg/L", 1, 5, 2},
    {"NO3N", "mg/L", 1, 15, 2},
    {"NO2N", "mg/L", 0, 1, 2},
    {"TP", "mg/L", 1, 7, 2},
    {"PH", "pH", 6, 8, 1},
    {"TEMP", "degC", 8, 25, 1},
    {"ALK", "mg/L", 100, 300, 0},
    {"MLSS", "mg/L", 2500, 3500, 0},
    {"MLVSS", "mg/L", 1800, 2400, 0},
    {"SV30", "mL/L", 150, 400, 0},
    {"DO", "mg/L", 1, 9, 1},
    {"OUR", "mg/L/h", 20, 60, 1},
    {"TURB", "NTU", 1, 10, 2},
    {"ECOLI", "MPN/100mL", 1, 300, 0},
    {"COND", "uS/cm", 300, 900, 0},
    {"BLANKET", "ft", 1, 4, 1},
    {"VA", "mg/L", 50, 300, 0},
    {"RAIN", "in", 0, 2, 2},
    {"ENERGY", "kWh", 4000, 9000, 0},
    {"AIR", "ft3/d", 2000000, 6000000, 0},
    {"GRIT", "ft3", 4, 20, 1},
    {"SCREENINGS", "ft3", 4, 20, 1},
};

/* Return and waste sludge are thicker than they are anywhere else, and less of it flows. */
static void write_measured(FILE *f, const char *date, const char *point, const char *parameter)
{
    size_t k = 0;
    while (k + 1 < COUNT(ranges) && strcmp(ranges[k].parameter, parameter) != 0)
        k++;
    unsigned power = 1;
    for (int i = 0; i < ranges[k].decimals; i++)
        power *= 10;
    unsigned low = (unsigned)ranges[k].low, high = (unsigned)ranges[k].high;
    if (strcmp(parameter, "TSS") == 0 && strstr("RAS WAS", point) != NULL)
        low = 7000, high = 9000;
    if (strcmp(parameter, "FLOW") == 0 && strcmp(point, "WAS") == 0)
        low = 0, high = 1;
    unsigned value = low * power + next((high - low) * power);
    fprintf(f, "%s,%s,%s,%u", date, point, parameter, value / power);
    if (ranges[k].decimals > 0)
        fprintf(f, ".%0*u", ranges[k].decimals, value % power);
    fprintf(f, ",%s\n", ranges[k].unit);
}

static void write_works_day(FILE *f, const char *date)
{
    for (size_t i = 0; i < COUNT(works); i++) {
        char words[200];
        snprintf(words, sizeof words, "%s", works[i].parameters);
        char *rest = NULL;
        for (char *word = strtok_r(words, " ", &rest); word; word = strtok_r(NULL, " ", &rest))
            write_measured(f, date, works[i].point, word);
    }
}

static void write_works_readings(const char *folder)
{
    FILE *f = opened(folder, "works.csv");
    fprintf(f, "date,point,parameter,value,unit\n");
    for (int year = 2015; year <= 2024; year++)
        for (int month = 1; month <= 12; month++)
            for (int date = 1; date <= days_of(year, month); date++) {
                char day[40];
                snprintf(day, sizeof day, "%04d-%02d-%02d", year, month, date);
                write_works_day(f, day);
            }
    closed(f);
}

static void write_works(const char *folder)
{
    char path[900];
    snprintf(path, sizeof path, "%s/works", folder);
    mkdir(path, 0777);
    FILE *f = opened(path, "plant.csv");
    fprintf(f, "field,value\nname,Ten years of works\npermit,XX0000000\nunits,us\n");
    closed(f);
    f = opened(path, "points.csv");
    fprintf(f, "point,name,role,outfall\nINF,Influent,influent,\nPE,Primary,primary-effluent,\n"
               "AER1,Basin 1,aeration,\nAER2,Basin 2,aeration,\nAER3,Basin 3,aeration,\n"
               "AER4,Basin 4,aeration,\nRAS,Return,return-sludge,\nWAS,Waste,waste-sludge,\n"
               "SE,Secondary,secondary-effluent,\nEFF,Effluent,effluent,001\n"
               "UP,Upstream,upstream,\nDOWN,Downstream,downstream,\nC1,Clarifier 1,other,\n"
               "C2,Clarifier 2,other,\nDIG,Digester,digester,\nYARD,Yard,other,\n");
    closed(f);
    f = opened(path, "basins.csv");
    fprintf(f, "basin,kind,volume,volume_unit,area,area_unit,weir,weir_unit,point,from,to\n");
    for (int i = 1; i <= 4; i++)
        fprintf(f, "A%d,aeration,0.4,MG,,,,,AER%d,,\n", i, i);
    fprintf(f, "S1,secondary-clarifier,0.3,MG,3000,ft2,200,ft,,,\n"
               "S2,secondary-clarifier,0.3,MG,3000,ft2,200,ft,,,\n");
    closed(f);
    f = opened(folder, "works/limits.csv");
    fprintf(f, "outfall,point,parameter,basis,statistic,bound,limit,unit,samples\n"
               "001,EFF,BOD5,concentration,monthly-average,max,30,mg/L,\n");
    closed(f);
}

int main(int argc, char **argv)
{
    int years = argc == 4 ? (int)strtol(argv[3], NULL, 10) : 10;
    if (argc < 3 || argc > 4 || years < 1 || years > 100) {
        fprintf(stderr, "usage: make_years FOLDER ROWS [YEARS]\n");
        return 2;
    }
    write_plant(argv[1]);
    write_readings(argv[1], strtol(argv[2], NULL, 10), years);
    write_works(argv[1]);
    write_works_readings(argv[1]);
    return 0;
}
