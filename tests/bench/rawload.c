/* rawload: what a load costs at the least when nothing is understood and nothing is proved:
 * libcsv's cells straight into a STRICT table with text keys and the same unique index, in one
 * transaction. rawload DATABASE FILE */
#include <csv.h>
#include <sqlite3.h>
#include <stdio.h>
#include <string.h>

enum { COLUMNS = 9 };

struct raw {
    sqlite3 *db;
    sqlite3_stmt *add;
    int column;
    long row;
};

static void die(sqlite3 *db, const char *what)
{
    fprintf(stderr, "rawload: %s: %s\n", what, sqlite3_errmsg(db));
    _Exit(1);
}

static void run(sqlite3 *db, const char *sql)
{
    if (sqlite3_exec(db, sql, NULL, NULL, NULL) != SQLITE_OK)
        die(db, sql);
}

static void cell(void *at, size_t length, void *context)
{
    struct raw *r = context;
    if (r->row > 0 && r->column < COLUMNS)
        sqlite3_bind_text(r->add, 1 + r->column, at ? at : "", at ? (int)length : 0,
                          SQLITE_TRANSIENT);
    r->column++;
}

static void row(int c, void *context)
{
    struct raw *r = context;
    (void)c;
    if (r->row > 0) {
        sqlite3_bind_int64(r->add, COLUMNS + 1, r->row + 1);
        if (sqlite3_step(r->add) != SQLITE_DONE)
            die(r->db, "insert");
        sqlite3_reset(r->add);
    }
    r->row++;
    r->column = 0;
}

static void prepare(struct raw *r, const char *path)
{
    if (sqlite3_open(path, &r->db) != SQLITE_OK)
        die(r->db, path);
    run(r->db, "CREATE TABLE reading (id INTEGER PRIMARY KEY, date TEXT NOT NULL, time TEXT NOT "
               "NULL, point TEXT NOT NULL, "
               "parameter TEXT NOT NULL, value TEXT NOT NULL, unit TEXT NOT NULL, sample TEXT NOT "
               "NULL, method TEXT NOT NULL, "
               "analyst TEXT NOT NULL, line INTEGER NOT NULL) STRICT;"
               "CREATE UNIQUE INDEX reading_key ON reading (point, parameter, date, time, sample);"
               "BEGIN");
    if (sqlite3_prepare_v2(
            r->db,
            "INSERT INTO reading (date, time, point, parameter, value, unit, sample, method, "
            "analyst, line) "
            "VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10) ON CONFLICT DO NOTHING",
            -1, &r->add, NULL) != SQLITE_OK)
        die(r->db, "prepare");
}

int main(int argc, char **argv)
{
    static char block[1 << 16];
    struct raw r = {0};
    struct csv_parser parser;
    if (argc != 3)
        return 2;
    FILE *in = fopen(argv[2], "rb");
    if (!in) {
        perror(argv[2]);
        return 1;
    }
    prepare(&r, argv[1]);
    csv_init(&parser, CSV_STRICT | CSV_STRICT_FINI | CSV_APPEND_NULL | CSV_EMPTY_IS_NULL);
    for (size_t got; (got = fread(block, 1, sizeof block, in)) > 0;) {
        if (csv_parse(&parser, block, got, cell, row, &r) != got) {
            fprintf(stderr, "rawload: %s\n", csv_strerror(csv_error(&parser)));
            return 1;
        }
    }
    if (csv_fini(&parser, cell, row, &r) != 0)
        return 1;
    csv_free(&parser);
    fclose(in);
    run(r.db, "COMMIT");
    sqlite3_finalize(r.add);
    sqlite3_close(r.db);
    return 0;
}
