/* statement: the texts, and preparing, binding and stepping them. */
#include "book/statement.h"

#include <assert.h>
#include <errno.h>
#include <string.h>

#include "book/store.h"

#include "base/poison.h"

#define ASIDE_COLUMNS                                                                              \
    "a.id, a.batch, a.line, a.column_number, a.day, a.date, a.time, a.point, a.parameter, "        \
    "a.value, a.unit, "                                                                            \
    "a.sample, a.method, a.analyst, a.collected_by, a.analyzed, a.mdl, a.rl, a.note, a.raw, "      \
    "a.reason, "                                                                                   \
    "a.explanation, a.mark"

#define RAW_VALUE_COLUMNS                                                                          \
    "v.id, v.batch, v.line, v.sheet, v.date, v.time, v.point, v.run, v.argument, v.value, "        \
    "v.unit, "                                                                                     \
    "v.mark"

#define ROW_COLUMNS "batch, place, builtin, file, line, mark, "

const char *const book_sql[] = {
    [LAST_BATCH] = "SELECT coalesce(max(id), 0) FROM batch",
    [LAST_HEAD] = "SELECT head FROM chain WHERE batch <= ?1 ORDER BY batch DESC LIMIT 1",
    [ADD_BATCH] = "INSERT INTO batch (id, kind, at, who) VALUES (?1, ?2, ?3, ?4)",
    [ADD_LOAD] =
        "INSERT INTO load (batch, file, bytes, digest, dialect, reason, rows, accepted, present, "
        "revised, aside, first_reading, first_aside) "
        "VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10, ?11, ?12, ?13)",
    [ADD_DESCRIPTION] = "INSERT INTO description (batch, reason, rows) VALUES (?1, ?2, ?3)",
    [ADD_CHAIN] = "INSERT INTO chain (batch, previous, head) VALUES (?1, ?2, ?3)",
    [KNOWN_LOAD] =
        "SELECT l.batch, l.file, b.at, l.rows, l.accepted, l.present, l.revised, l.aside "
        "FROM load l JOIN batch b ON b.id = l.batch WHERE l.digest = ?1 "
        "AND NOT EXISTS (SELECT 1 FROM act t WHERE t.subject = l.batch) "
        "ORDER BY l.batch DESC LIMIT 1",
    [BATCHES] =
        "SELECT b.id, b.kind, b.at, b.who, l.file, "
        "coalesce(l.reason, d.reason, t.reason, m.text, w.reason), "
        "coalesce(l.rows, d.rows, t.readings), l.accepted, l.present, "
        "coalesce(l.revised, t.readings), l.aside, c.head "
        "FROM batch b LEFT JOIN load l ON l.batch = b.id LEFT JOIN description d ON d.batch = b.id "
        "LEFT JOIN act t ON t.batch = b.id LEFT JOIN remark m ON m.batch = b.id "
        "LEFT JOIN answer w ON w.batch = b.id LEFT JOIN chain c ON c.batch = b.id "
        "WHERE b.id <= ?1 ORDER BY b.id",
    /* What an act made stands on no line of a file. */
    [FILE_OF_BATCH] =
        "SELECT coalesce(l.file, CASE b.kind WHEN 'amend' THEN 'amended by ' || b.who "
        "ELSE 'batch ' || t.subject || ' taken back by ' || b.who END) "
        "FROM batch b LEFT JOIN load l ON l.batch = b.id LEFT JOIN act t ON t.batch = b.id "
        "WHERE b.id = ?1",

    [FIND_POINT] = "SELECT id FROM point_code WHERE name = ?1",
    [ADD_POINT] = "INSERT INTO point_code (name) VALUES (?1)",
    [FIND_PARAMETER] = "SELECT id FROM parameter_code WHERE name = ?1",
    [ADD_PARAMETER] = "INSERT INTO parameter_code (name) VALUES (?1)",
    [FIND_UNIT] = "SELECT id FROM unit_code WHERE name = ?1",
    [ADD_UNIT] = "INSERT INTO unit_code (name) VALUES (?1)",
    [FIND_SERIES] = "SELECT id FROM series WHERE point = ?1 AND parameter = ?2 AND sample = ?3",
    [ADD_SERIES] = "INSERT INTO series (point, parameter, sample) VALUES (?1, ?2, ?3)",
    [FIND_DETAIL] =
        "SELECT id FROM detail WHERE unit = ?1 AND mdl = ?2 AND rl = ?3 AND method = ?4 "
        "AND analyst = ?5 AND collected_by = ?6 AND analyzed = ?7 AND note = ?8",
    [ADD_DETAIL] =
        "INSERT INTO detail (unit, mdl, rl, method, analyst, collected_by, analyzed, note) "
        "VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8)",
    [SERIES_NAMES] =
        "SELECT s.id, p.name, q.name, s.sample FROM series s "
        "JOIN point_code p ON p.id = s.point JOIN parameter_code q ON q.id = s.parameter "
        "ORDER BY s.id",
    [DETAIL_AT] =
        "SELECT u.name, d.mdl, d.rl, d.method, d.analyst, d.collected_by, d.analyzed, d.note "
        "FROM detail d JOIN unit_code u ON u.id = d.unit WHERE d.id = ?1",

    [LAST_READING] = "SELECT coalesce(max(id), 0) FROM reading",
    /* No question whether the key is there before it is put in: that would cost every row a search.
     */
    [ADD_READING] =
        "INSERT INTO reading (id, series, day, minute, version, batch, line, qualifier, code, "
        "value, coefficient, scale, detail, mark) "
        "VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10, ?11, ?12, ?13, ?14) "
        "ON CONFLICT (series, day, minute, version) DO NOTHING",
    [ADD_REVISION] = "INSERT INTO revision (reading, replaced, day) VALUES (?1, ?2, ?3)",
    [NEWEST_READING] = "SELECT " READING_COLUMNS " FROM reading r "
                       "WHERE r.series = ?1 AND r.day = ?2 AND r.minute = ?3 "
                       "ORDER BY r.version DESC LIMIT 1",
    [LAST_ASIDE] = "SELECT coalesce(max(id), 0) FROM aside",
    [ADD_ASIDE] =
        "INSERT INTO aside (id, batch, line, column_number, day, date, time, point, parameter, "
        "value, unit, sample, method, analyst, collected_by, analyzed, mdl, rl, note, raw, reason, "
        "explanation, mark) VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10, ?11, ?12, ?13, ?14, "
        "?15, ?16, ?17, ?18, ?19, ?20, ?21, ?22, ?23)",
    [LAST_RAW] = "SELECT coalesce(max(id), 0) FROM bench_value",
    [ADD_RAW] =
        "INSERT INTO bench_value (id, batch, line, sheet, date, time, point, run, argument, "
        "value, unit, mark) VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10, ?11, ?12)",
    [ADD_BENCH] = "INSERT INTO bench (batch, raw_values, first_raw) VALUES (?1, ?2, ?3)",

    [SERIES_SPAN] = "SELECT " READING_COLUMNS " FROM reading r "
                    "WHERE r.series = ?1 AND r.day BETWEEN ?2 AND ?3 "
                    "ORDER BY r.day, r.minute, r.version",
    [ALL_OF_DAYS] = "SELECT " READING_COLUMNS " FROM reading r NOT INDEXED "
                    "WHERE r.day BETWEEN ?1 AND ?2 ORDER BY r.id",
    [SERIES_BEFORE] =
        "SELECT " READING_COLUMNS " FROM reading r WHERE r.series = ?1 AND r.day < ?2 "
        "ORDER BY r.day DESC, r.minute DESC, r.version DESC",
    [SERIES_HAS] = "SELECT 1 FROM reading WHERE series = ?1 AND day BETWEEN ?2 AND ?3 LIMIT 1",
    [SERIES_FIRST] = "SELECT min(day) FROM reading WHERE series = ?1",
    [SERIES_LAST] = "SELECT max(day) FROM reading WHERE series = ?1",
    [COLUMN_IN_FORCE] =
        "SELECT " READING_COLUMNS " FROM point_code p JOIN parameter_code q JOIN series s "
        "ON s.point = p.id AND s.parameter = q.id JOIN reading r ON r.series = s.id "
        "WHERE p.name = ?1 AND q.name = ?2 AND r.day BETWEEN ?3 AND ?4 AND r.qualifier <> 7 "
        "AND NOT EXISTS (SELECT 1 FROM reading n WHERE n.series = r.series AND n.day = r.day "
        "AND n.minute = r.minute AND n.version > r.version) "
        "ORDER BY r.day, r.minute, s.sample",
    [SERIES_HAS_THEN] = "SELECT 1 FROM reading WHERE series = ?1 AND day BETWEEN ?2 AND ?3 "
                        "AND batch <= ?4 LIMIT 1",
    [SERIES_FIRST_THEN] =
        "SELECT day FROM reading WHERE series = ?1 AND batch <= ?2 ORDER BY day LIMIT 1",
    [SERIES_LAST_THEN] =
        "SELECT day FROM reading WHERE series = ?1 AND batch <= ?2 ORDER BY day DESC LIMIT 1",
    [COLUMN_IN_FORCE_THEN] =
        "SELECT " READING_COLUMNS " FROM point_code p JOIN parameter_code q JOIN series s "
        "ON s.point = p.id AND s.parameter = q.id JOIN reading r ON r.series = s.id "
        "WHERE p.name = ?1 AND q.name = ?2 AND r.day BETWEEN ?3 AND ?4 AND r.qualifier <> 7 "
        "AND r.batch <= ?5 AND NOT EXISTS (SELECT 1 FROM reading n WHERE n.series = r.series "
        "AND n.day = r.day AND n.minute = r.minute AND n.version > r.version AND n.batch <= ?5) "
        "ORDER BY r.day, r.minute, s.sample",
    [REVISIONS] =
        "SELECT r.day, r.minute, r.series, r.detail, r.qualifier, r.value, o.value, r.version, "
        "r.batch, r.line, b.who, b.at, coalesce(l.reason, t.reason, ''), coalesce(l.file, ''), "
        "o.detail "
        "FROM revision v JOIN reading r ON r.id = v.reading JOIN reading o ON o.id = v.replaced "
        "JOIN batch b ON b.id = r.batch LEFT JOIN load l ON l.batch = r.batch "
        "LEFT JOIN act t ON t.batch = r.batch "
        "WHERE v.day BETWEEN ?1 AND ?2 ORDER BY v.day, v.reading",
    [ASIDES_OF_DAYS] = "SELECT " ASIDE_COLUMNS " FROM aside a "
                       "WHERE a.day BETWEEN ?1 AND ?2 OR a.day IS NULL ORDER BY a.id",
    [ASIDES_ALL] = "SELECT " ASIDE_COLUMNS " FROM aside a ORDER BY a.id",
    [RAW_OF_LINE] = "SELECT " RAW_VALUE_COLUMNS " FROM bench_value v "
                    "WHERE v.batch = ?1 AND v.line = ?2 ORDER BY v.id LIMIT 1",
    [RAW_OF_BATCH] = "SELECT " RAW_VALUE_COLUMNS " FROM bench_value v "
                     "WHERE v.batch = ?1 ORDER BY v.id",
    [RAW_NEWEST] = "SELECT " RAW_VALUE_COLUMNS " FROM bench_value v WHERE v.sheet = ?1 "
                   "AND v.point = ?2 AND v.run = ?3 AND v.argument = ?4 "
                   "ORDER BY v.id DESC LIMIT 1",

    [ADD_ACT] = "INSERT INTO act (batch, reason, subject, readings, first_reading, mark) "
                "VALUES (?1, ?2, ?3, ?4, ?5, ?6)",
    [TO_WITHDRAW] = "SELECT b.kind, l.accepted + l.revised, l.first_reading, t.batch FROM batch b "
                    "LEFT JOIN load l ON l.batch = b.id LEFT JOIN act t ON t.subject = b.id "
                    "WHERE b.id = ?1",
    [VERSIONS] =
        "SELECT " READING_COLUMNS ", b.kind, t.batch FROM reading r JOIN batch b ON b.id = r.batch "
        "LEFT JOIN act t ON t.subject = r.batch "
        "WHERE r.series = ?1 AND r.day = ?2 AND r.minute = ?3 ORDER BY r.version DESC",
    [ADD_REMARK] =
        "INSERT INTO remark (batch, kind, event, first_day, last_day, point, parameter, statistic, "
        "text, mark) VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10)",
    /* One that touches ?1 begins no earlier than the longest could. */
    [REMARKS] =
        "SELECT " REMARK_COLUMNS ", " ACT_COLUMNS ", b.who, b.at "
        "FROM remark m JOIN batch b ON b.id = m.batch LEFT JOIN act t ON t.subject = m.batch "
        "WHERE m.first_day BETWEEN ?1 - (SELECT coalesce(max(last_day - first_day), 0) FROM "
        "remark) "
        "AND ?2 AND m.last_day >= ?1 ORDER BY m.first_day, m.last_day, m.batch",
    [REMARK_AT] = "SELECT b.kind, t.batch FROM batch b LEFT JOIN act t ON t.subject = b.id "
                  "WHERE b.id = ?1",
    [ADD_ANSWER] = "INSERT INTO answer (batch, doubt, reason, mark) VALUES (?1, ?2, ?3, ?4)",
    [ANSWERS] = "SELECT " ANSWER_COLUMNS ", b.who, b.at FROM answer w JOIN batch b ON b.id = "
                "w.batch ORDER BY w.batch",

    /* The last before the first that is later, and whether one behind it claims to be earlier. */
    [BATCH_AT] = "SELECT b.last, EXISTS (SELECT 1 FROM batch WHERE id > b.last AND at <= ?1) FROM "
                 "(SELECT coalesce((SELECT id FROM batch WHERE at > ?1 ORDER BY id LIMIT 1) - 1, "
                 "(SELECT max(id) FROM batch)) AS last) b",
    [HAS_HEAD] = "SELECT batch FROM chain WHERE head = ?1 ORDER BY batch LIMIT 1",
    [HISTORY] = "SELECT b.id, b.kind, b.at, b.who, l.file, l.reason, l.accepted + l.revised, "
                "l.first_reading, d.reason, " ACT_COLUMNS ", " REMARK_COLUMNS ", " ANSWER_COLUMNS
                " FROM batch b LEFT JOIN load l ON l.batch = b.id "
                "LEFT JOIN description d ON d.batch = b.id LEFT JOIN act t ON t.batch = b.id "
                "LEFT JOIN remark m ON m.batch = coalesce(t.subject, b.id) "
                "LEFT JOIN answer w ON w.batch = b.id "
                "WHERE b.id BETWEEN ?1 AND ?2 ORDER BY b.id",
    [READING_BY_ID] = "SELECT " READING_COLUMNS " FROM reading r WHERE r.id = ?1",
    [CHANGED] = "SELECT v.reading, v.replaced FROM revision v WHERE v.reading BETWEEN ?1 AND ?2 "
                "ORDER BY v.reading",
    [MADE] = "SELECT r.id, v.replaced FROM reading r LEFT JOIN revision v ON v.reading = r.id "
             "WHERE r.id BETWEEN ?1 AND ?2 ORDER BY r.id",
    [DESCRIPTION_BEFORE] = "SELECT coalesce(max(batch), 0) FROM description WHERE batch < ?1",

    [DESCRIPTION_IN_FORCE] = "SELECT coalesce(max(batch), 0) FROM description WHERE batch <= ?1",
    [ADD_ROW + PLANT_FIELDS] = "INSERT INTO plant_field (" ROW_COLUMNS "field, value) "
                               "VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8)",
    [ADD_ROW + PLANT_POINTS] =
        "INSERT INTO plant_point (" ROW_COLUMNS "point, name, role, outfall) "
        "VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10)",
    [ADD_ROW + PLANT_PARAMETERS] = "INSERT INTO plant_parameter (" ROW_COLUMNS
                                   "parameter, name, unit, decimals, day_rule, average, "
                                   "code, low, high, mdl, rl, rules) VALUES (?1, ?2, ?3, ?4, ?5, "
                                   "?6, ?7, ?8, ?9, ?10, ?11, ?12, ?13, "
                                   "?14, ?15, ?16, ?17, ?18)",
    [ADD_ROW + PLANT_BASINS] = "INSERT INTO plant_basin (" ROW_COLUMNS
                               "basin, kind, point, volume, volume_unit, area, area_unit, "
                               "weir, weir_unit, \"from\", \"to\") VALUES (?1, ?2, ?3, ?4, ?5, ?6, "
                               "?7, ?8, ?9, ?10, ?11, ?12, ?13, "
                               "?14, ?15, ?16, ?17)",
    [ADD_ROW + PLANT_LIMITS] = "INSERT INTO plant_limit (" ROW_COLUMNS
                               "outfall, point, parameter, basis, statistic, bound, "
                               "\"limit\", unit, season, \"from\", \"to\", \"when\", samples, "
                               "sample, allowed, ceiling, \"group\", "
                               "rules, note) VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10, ?11, "
                               "?12, ?13, ?14, ?15, ?16, ?17, "
                               "?18, ?19, ?20, ?21, ?22, ?23, ?24, ?25)",
    [ADD_ROW + PLANT_METERS] =
        "INSERT INTO plant_meter (" ROW_COLUMNS
        "point, parameter, kind, rolls_at, multiplier, \"from\", "
        "\"to\") VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10, ?11, ?12, ?13)",
    [ADD_ROW + PLANT_PROCESS] = "INSERT INTO plant_process (" ROW_COLUMNS
                                "name, at, parameter, formula, argument, source, unit) "
                                "VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10, ?11, ?12, ?13)",
    [ADD_ROW + PLANT_ROUND] = "INSERT INTO plant_round (" ROW_COLUMNS "point, parameter, sample) "
                              "VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9)",
    [GET_ROWS + PLANT_FIELDS] = "SELECT " ROW_COLUMNS "field, value FROM plant_field "
                                "WHERE batch = ?1 ORDER BY place",
    [GET_ROWS + PLANT_POINTS] = "SELECT " ROW_COLUMNS "point, name, role, outfall FROM plant_point "
                                "WHERE batch = ?1 ORDER BY place",
    [GET_ROWS + PLANT_PARAMETERS] =
        "SELECT " ROW_COLUMNS
        "parameter, name, unit, decimals, day_rule, average, code, low, high, mdl, "
        "rl, rules FROM plant_parameter WHERE batch = ?1 ORDER BY place",
    [GET_ROWS + PLANT_BASINS] =
        "SELECT " ROW_COLUMNS
        "basin, kind, point, volume, volume_unit, area, area_unit, weir, weir_unit, "
        "\"from\", \"to\" FROM plant_basin WHERE batch = ?1 ORDER BY place",
    [GET_ROWS + PLANT_LIMITS] =
        "SELECT " ROW_COLUMNS
        "outfall, point, parameter, basis, statistic, bound, \"limit\", unit, season, "
        "\"from\", \"to\", \"when\", samples, sample, allowed, ceiling, \"group\", rules, note "
        "FROM plant_limit WHERE batch = ?1 ORDER BY place",
    [GET_ROWS + PLANT_METERS] =
        "SELECT " ROW_COLUMNS "point, parameter, kind, rolls_at, multiplier, "
        "\"from\", \"to\" FROM plant_meter WHERE batch = ?1 ORDER BY place",
    [GET_ROWS + PLANT_PROCESS] =
        "SELECT " ROW_COLUMNS "name, at, parameter, formula, argument, source, unit "
        "FROM plant_process WHERE batch = ?1 ORDER BY place",
    [GET_ROWS + PLANT_ROUND] = "SELECT " ROW_COLUMNS "point, parameter, sample FROM plant_round "
                               "WHERE batch = ?1 ORDER BY place",

    [CHECK_PAGES] = "PRAGMA integrity_check(20)",
    [CHECK_KEYS] = "PRAGMA foreign_key_check",
    [CHECK_SCHEMA] = "SELECT type, name, tbl_name, sql FROM sqlite_schema ORDER BY type, name",
    [CHECK_TRIGGERS] = "SELECT name, sql FROM sqlite_schema WHERE type = 'trigger'",
    [CHECK_QUALIFIERS] = "SELECT id, word FROM qualifier ORDER BY id",
    [CHECK_BATCHES] =
        "SELECT b.id, b.kind, b.at, b.who, l.batch, l.file, l.bytes, l.digest, l.dialect, "
        "l.reason, l.rows, l.accepted, l.present, l.revised, l.aside, l.first_reading, "
        "l.first_aside, d.batch, d.reason, d.rows, n.batch, n.raw_values, n.first_raw, c.previous, "
        "c.head, " ACT_COLUMNS ", " REMARK_COLUMNS ", " ANSWER_COLUMNS " "
        "FROM batch b LEFT JOIN load l ON l.batch = b.id "
        "LEFT JOIN description d ON d.batch = b.id LEFT JOIN bench n ON n.batch = b.id "
        "LEFT JOIN act t ON t.batch = b.id LEFT JOIN remark m ON m.batch = b.id "
        "LEFT JOIN answer w ON w.batch = b.id "
        "LEFT JOIN chain c ON c.batch = b.id ORDER BY b.id",
    [CHECK_READINGS] =
        "SELECT " READING_COLUMNS " FROM reading r WHERE r.id BETWEEN ?1 AND ?2 ORDER BY r.id",
    /* How many there are, and how many of them join a reading to the version before it. */
    [CHECK_REVISIONS] =
        "SELECT count(*), count(o.id) FROM revision v LEFT JOIN reading r ON r.id = v.reading "
        "AND r.day = v.day AND r.version > 0 LEFT JOIN reading o ON o.id = v.replaced "
        "AND o.series = r.series AND o.day = r.day AND o.minute = r.minute AND o.version = "
        "r.version - 1",
    [CHECK_ASIDES] =
        "SELECT " ASIDE_COLUMNS " FROM aside a WHERE a.id BETWEEN ?1 AND ?2 ORDER BY a.id",
    [CHECK_RAW] = "SELECT " RAW_VALUE_COLUMNS " FROM bench_value v "
                  "WHERE v.id BETWEEN ?1 AND ?2 ORDER BY v.id",
    [ADD_QUALIFIER] = "INSERT INTO qualifier (id, word) VALUES (?1, ?2) ON CONFLICT DO NOTHING",
    [ADD_REASON] = "INSERT INTO aside_reason (reason, todo) VALUES (?1, ?2) "
                   "ON CONFLICT (reason) DO UPDATE SET todo = excluded.todo",
    [GET_FORMAT] = "PRAGMA user_version",
};
_Static_assert(NELEM(book_sql) == STATEMENTS, "one text per statement");

/* ---- faults ---- */

static enum status locked(const struct book *b, struct fault *f)
{
    /* Once our own writing has begun only a reader can stand in the way. */
    if (b->mode == BOOK_WRITE && !sqlite3_get_autocommit(b->db))
        return fault_at(f, NULL, "try again when it is done",
                        "'%s' is being read by another program", b->path);
    return fault_at(f, NULL, "try again when it is done",
                    "'%s' is being written by another program", b->path);
}

static enum status read_only(const struct book *b, struct fault *f)
{
    int code = sqlite3_extended_errcode(b->db);
    if (code == SQLITE_READONLY_ROLLBACK || code == SQLITE_READONLY_RECOVERY)
        return fault_at(f, NULL,
                        "copy both to a folder that can be written, and open the copy there",
                        "'%s' was left half written, and the file '%s-journal' that puts it right "
                        "cannot be used here",
                        b->path, b->path);
    return fault_at(f, NULL, "let yourself write the file and its folder, or work on a copy",
                    "'%s' cannot be written", b->path);
}

enum status book_fault(struct book *b, struct fault *f)
{
    int code = sqlite3_errcode(b->db), number = sqlite3_system_errno(b->db);
    b->last_code = code;
    b->half_written |= b->mode == BOOK_WRITE && (code == SQLITE_FULL || code == SQLITE_IOERR);
    switch (code) {
    case SQLITE_BUSY:
    case SQLITE_LOCKED:
        return locked(b, f);
    case SQLITE_READONLY:
        return read_only(b, f);
    case SQLITE_FULL:
        return fault_at(f, NULL, "make room, then do it again",
                        "no room is left for '%s'; it stays as it was", b->path);
    case SQLITE_IOERR:
        return fault_at(f, NULL, "see that the disk is well and has room, then do it again",
                        "cannot read or write '%s': %s; it stays as it was", b->path,
                        number ? strerror(number) : sqlite3_errmsg(b->db));
    case SQLITE_CANTOPEN:
    case SQLITE_PERM:
    case SQLITE_AUTH:
        return fault_at(f, NULL, "see that the file and its folder can be read and written",
                        "cannot open '%s': %s", b->path,
                        number ? strerror(number) : sqlite3_errmsg(b->db));
    case SQLITE_NOMEM:
        return fault_at(f, NULL, NULL, "memory ran out while working on '%s'", b->path);
    case SQLITE_NOTADB:
    case SQLITE_CORRUPT:
        return book_damaged(b, f, "%s", sqlite3_errmsg(b->db));
    case SQLITE_CONSTRAINT:
        return fault_at(f, NULL, NULL, "'%s' does not take this: %s", b->path,
                        sqlite3_errmsg(b->db));
    default:
        return book_damaged(b, f, "%s", sqlite3_errmsg(b->db));
    }
}

enum status book_damaged(const struct book *b, struct fault *f, const char *what, ...)
{
    char said[512];
    va_list ap;
    va_start(ap, what);
    vsnprintf(said, sizeof said, what, ap);
    va_end(ap);
    return fault_at(f, NULL, "run 'weirbook check', and go back to a sound copy",
                    "'%s' is damaged: %s", b->path, said);
}

/* ---- running ---- */

enum status book_statement(struct book *b, enum statement which, sqlite3_stmt **out,
                           struct fault *f)
{
    assert(which < STATEMENTS && book_sql[which]);
    sqlite3_stmt **s = &b->statement[which];
    if (!*s && sqlite3_prepare_v3(b->db, book_sql[which], -1, SQLITE_PREPARE_PERSISTENT, s, NULL) !=
                   SQLITE_OK)
        return book_fault(b, f);
    sqlite3_reset(*s);
    *out = *s;
    return OK;
}

enum status book_step(struct book *b, sqlite3_stmt *s, bool *row, struct fault *f)
{
    int code = sqlite3_step(s);
    *row = code == SQLITE_ROW;
    if (*row)
        return OK;
    if (code == SQLITE_DONE) {
        sqlite3_reset(s);
        return OK;
    }
    enum status rc = book_fault(b, f);
    sqlite3_reset(s);
    return rc;
}

enum status book_run(struct book *b, sqlite3_stmt *s, struct fault *f)
{
    bool row;
    if (book_step(b, s, &row, f) != OK)
        return FAULT;
    assert(!row);
    return OK;
}

enum status book_exec(struct book *b, const char *sql, struct fault *f)
{
    if (sqlite3_exec(b->db, sql, NULL, NULL, NULL) != SQLITE_OK)
        return book_fault(b, f);
    return OK;
}

/* ---- binding and reading ---- */

static void bound(int code)
{
    assert(code == SQLITE_OK);
    (void)code;
}

void bind_int(sqlite3_stmt *s, int at, int64_t n)
{
    bound(sqlite3_bind_int64(s, at, n));
}

void bind_text(sqlite3_stmt *s, int at, const char *text)
{
    bound(sqlite3_bind_text(s, at, text, -1, SQLITE_STATIC));
}

void bind_blob(sqlite3_stmt *s, int at, const void *bytes, size_t length)
{
    bound(sqlite3_bind_blob64(s, at, bytes, length, SQLITE_STATIC));
}

void bind_null(sqlite3_stmt *s, int at)
{
    bound(sqlite3_bind_null(s, at));
}

const char *column_text(sqlite3_stmt *s, int at)
{
    const char *text = (const char *)sqlite3_column_text(s, at);
    return text ? text : "";
}

bool column_digest(sqlite3_stmt *s, int at, uint8_t out[DIGEST_BYTES])
{
    const void *bytes = sqlite3_column_blob(s, at);
    if (!bytes || sqlite3_column_bytes(s, at) != DIGEST_BYTES)
        return false;
    memcpy(out, bytes, DIGEST_BYTES);
    return true;
}
