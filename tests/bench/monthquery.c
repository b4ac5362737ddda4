/* monthquery: what a month's readings cost to read at the least: the rows of one month of every
 * series, by the book's own index, newest version or not, their numbers added up so that they are
 * read. monthquery BOOK FIRST-DAY LAST-DAY (days from 1970-01-01) */
#include <sqlite3.h>
#include <stdio.h>
#include <stdlib.h>

static const char sql[] = "SELECT r.day, r.qualifier, r.coefficient, r.scale FROM series s "
                          "CROSS JOIN reading r ON r.series = s.id WHERE r.day BETWEEN ?1 AND ?2";

int main(int argc, char **argv)
{
    sqlite3 *db = NULL;
    sqlite3_stmt *s = NULL;
    long rows = 0;
    long long sum = 0;

    if (argc != 4 || sqlite3_open_v2(argv[1], &db, SQLITE_OPEN_READONLY, NULL) != SQLITE_OK ||
        sqlite3_prepare_v2(db, sql, -1, &s, NULL) != SQLITE_OK) {
        fprintf(stderr, "monthquery: %s\n", db ? sqlite3_errmsg(db) : "BOOK FIRST LAST");
        return 1;
    }
    sqlite3_bind_int(s, 1, (int)strtol(argv[2], NULL, 10));
    sqlite3_bind_int(s, 2, (int)strtol(argv[3], NULL, 10));
    while (sqlite3_step(s) == SQLITE_ROW) {
        sum += sqlite3_column_int(s, 0) + sqlite3_column_int(s, 1) + sqlite3_column_int64(s, 2) +
               sqlite3_column_int(s, 3);
        rows++;
    }
    sqlite3_finalize(s);
    sqlite3_close(db);
    printf("%ld rows, %lld\n", rows, sum);
    return rows == 0;
}
