-- The book, format 1: one plant's readings, its descriptions, and a hash chain over both.
--
-- What a person typed stands here as typed. Nothing that stands here is changed or taken out: a
-- correction is a new version of a reading, a changed description is a new batch, a row that could
-- not be accepted is kept whole. What can be worked out again (figures, daily values) is not kept.
--
-- Days are numbered from 1970-01-01; date(day * 86400, 'unixepoch') shows one. The views at the end
-- show dates, names and values as the reports do; people should look at those, programs at the tables.
--
-- Word lists are tables or ranges and never IN (...): a list is built anew for every row that is put
-- in, and doubles the time of a load.

PRAGMA application_id = 1466263922; -- 0x57656972, "Weir"
PRAGMA user_version = 1;

-- ---- what was done to the book, by whom, and the chain over it ------------------------------------

CREATE TABLE batch_kind (
    kind    TEXT NOT NULL PRIMARY KEY,
    meaning TEXT NOT NULL
) STRICT, WITHOUT ROWID;

INSERT INTO batch_kind (kind, meaning) VALUES
    ('description', 'a plant description put in force'),
    ('load', 'one readings file');

CREATE TABLE batch (
    id   INTEGER PRIMARY KEY,  -- 1, 2, 3 ... without gaps, in the order they were written
    kind TEXT NOT NULL REFERENCES batch_kind (kind),
    at   TEXT NOT NULL         -- when, in UTC: 2025-04-01T06:10:00Z
         CONSTRAINT batch_at CHECK (at GLOB
             '[0-9][0-9][0-9][0-9]-[0-9][0-9]-[0-9][0-9]T[0-9][0-9]:[0-9][0-9]:[0-9][0-9]Z'),
    who  TEXT NOT NULL         -- a name, initials or the login
         CONSTRAINT batch_who CHECK (who <> '')
) STRICT;

CREATE TABLE load (
    batch         INTEGER PRIMARY KEY REFERENCES batch (id),
    file          TEXT NOT NULL,     -- as it was named to the program
    bytes         INTEGER NOT NULL,  -- its size
    digest        BLOB NOT NULL      -- its SHA-256: tells a file that is loaded twice
                  CONSTRAINT load_digest CHECK (length(digest) = 32),
    dialect       TEXT NOT NULL,     -- how it was understood: "long, commas, UTF-8"
    reason        TEXT NOT NULL,     -- why values were revised; '' when none were to be
    rows          INTEGER NOT NULL,  -- read from the file
    accepted      INTEGER NOT NULL,  -- new readings
    present       INTEGER NOT NULL,  -- stood in the book with this value
    revised       INTEGER NOT NULL,  -- became a new version of a reading
    aside         INTEGER NOT NULL,  -- could not be accepted; kept in table aside
    first_reading INTEGER NOT NULL,  -- its readings are this id and the accepted + revised - 1 next
    first_aside   INTEGER NOT NULL,  -- its rows set aside are this id and the aside - 1 next
    CONSTRAINT load_sizes CHECK (bytes >= 0 AND accepted >= 0 AND present >= 0 AND revised >= 0
                                 AND aside >= 0),
    CONSTRAINT load_counts_add_up CHECK (rows = accepted + present + revised + aside),
    CONSTRAINT load_revisions_have_a_reason CHECK (revised = 0 OR reason <> '')
) STRICT;

CREATE INDEX load_by_digest ON load (digest);

CREATE TABLE description (
    batch  INTEGER PRIMARY KEY REFERENCES batch (id),  -- the highest is in force
    reason TEXT NOT NULL,                              -- why it was put in force
    rows   INTEGER NOT NULL                            -- how many rows its files have together
           CONSTRAINT description_rows CHECK (rows > 0)
) STRICT;

CREATE TABLE chain (
    batch    INTEGER PRIMARY KEY REFERENCES batch (id),
    previous BLOB NOT NULL  -- the head before this batch; 32 zero bytes before the first
             CONSTRAINT chain_previous CHECK (length(previous) = 32),
    head     BLOB NOT NULL  -- SHA-256 of the previous head, the batch and all that came with it
             CONSTRAINT chain_head CHECK (length(head) = 32)
) STRICT;

-- ---- short numbers for names that recur: they only ever grow ---------------------------------------

CREATE TABLE point_code (
    id   INTEGER PRIMARY KEY,
    name TEXT NOT NULL UNIQUE  -- as in points.csv: 'EFF'
) STRICT;

CREATE TABLE parameter_code (
    id   INTEGER PRIMARY KEY,
    name TEXT NOT NULL UNIQUE  -- as in parameters.csv or the built-in catalogue: 'BOD5'
) STRICT;

CREATE TABLE unit_code (
    id   INTEGER PRIMARY KEY,
    name TEXT NOT NULL UNIQUE  -- as spelled in the files: 'mg/L'
) STRICT;

CREATE TABLE series (
    id        INTEGER PRIMARY KEY,
    point     INTEGER NOT NULL REFERENCES point_code (id),
    parameter INTEGER NOT NULL REFERENCES parameter_code (id),
    sample    TEXT NOT NULL,  -- which sample of the day; '' mostly
    UNIQUE (point, parameter, sample)
) STRICT;

-- What many readings have in common.
CREATE TABLE detail (
    id           INTEGER PRIMARY KEY,
    unit         INTEGER NOT NULL REFERENCES unit_code (id),
    mdl          TEXT NOT NULL,  -- method detection limit, in the unit; '' where none is known
    rl           TEXT NOT NULL,  -- reporting limit, likewise
    method       TEXT NOT NULL,  -- '' where the file says nothing, here and below
    analyst      TEXT NOT NULL,
    collected_by TEXT NOT NULL,
    analyzed     TEXT NOT NULL,  -- when, as written
    note         TEXT NOT NULL,
    UNIQUE (unit, mdl, rl, method, analyst, collected_by, analyzed, note)
) STRICT;

CREATE TABLE qualifier (
    id   INTEGER PRIMARY KEY,
    word TEXT NOT NULL UNIQUE  -- 'plain', 'less', ...
) STRICT;

-- ---- readings -----------------------------------------------------------------------------------------

CREATE TABLE reading (
    id          INTEGER PRIMARY KEY,  -- in the order of loading, without gaps
    series      INTEGER NOT NULL REFERENCES series (id),
    day         INTEGER NOT NULL      -- the plant's local date
                CONSTRAINT reading_day CHECK (day BETWEEN -25567 AND 84005),
    minute      INTEGER NOT NULL      -- after midnight; -1: no time given
                CONSTRAINT reading_minute CHECK (minute BETWEEN -1 AND 1440),
    version     INTEGER NOT NULL      -- 0 as first loaded; the highest is in force
                CONSTRAINT reading_version CHECK (version >= 0),
    batch       INTEGER NOT NULL REFERENCES batch (id),
    line        INTEGER NOT NULL,     -- of the batch's file
    qualifier   INTEGER NOT NULL      -- table qualifier; 6: a no-data code, 7: withdrawn
                CONSTRAINT reading_qualifier CHECK (qualifier BETWEEN 0 AND 7),
    code        TEXT                  -- the no-data code
                CONSTRAINT reading_code CHECK ((code IS NOT NULL) = (qualifier = 6)),
    value       TEXT NOT NULL,        -- as written in the file: '30.0' keeps its zero
    coefficient INTEGER               -- the number is coefficient / 10^scale, exactly
                CONSTRAINT reading_number CHECK ((coefficient IS NOT NULL) = (qualifier < 6)),
    scale       INTEGER
                CONSTRAINT reading_scale CHECK ((scale IS NOT NULL) = (qualifier < 6)
                                                AND (scale IS NULL OR scale BETWEEN 0 AND 18)),
    detail      INTEGER NOT NULL REFERENCES detail (id),  -- its unit, and what else is known of it
    mark        INTEGER NOT NULL      -- a 63-bit FNV-1a hash of all the above, names for numbers
) STRICT;

CREATE UNIQUE INDEX reading_key ON reading (series, day, minute, version);

-- Which readings replaced which. It could be worked out from the versions; it is kept so that they are
-- found without a search through all readings. (An index over the versions would cost every row of a load.)
CREATE TABLE revision (
    reading  INTEGER PRIMARY KEY REFERENCES reading (id),       -- the new version
    replaced INTEGER NOT NULL UNIQUE REFERENCES reading (id),  -- the version before it
    day      INTEGER NOT NULL                                   -- of both
) STRICT;

CREATE INDEX revision_by_day ON revision (day);

-- ---- rows that could not be accepted, as they were written ------------------------------------------------

CREATE TABLE aside_reason (
    reason TEXT NOT NULL PRIMARY KEY,
    todo   TEXT NOT NULL  -- what to do about it
) STRICT, WITHOUT ROWID;

CREATE TABLE aside (
    id            INTEGER PRIMARY KEY,  -- in the order of loading, without gaps
    batch         INTEGER NOT NULL REFERENCES batch (id),
    line          INTEGER NOT NULL,     -- of the batch's file
    column_number INTEGER NOT NULL,     -- the cell of a wide file; 0 in a long file
    day           INTEGER,              -- where the date could be read
    date          TEXT NOT NULL,        -- the cells as written, '' where there was none
    time          TEXT NOT NULL,
    point         TEXT NOT NULL,
    parameter     TEXT NOT NULL,
    value         TEXT NOT NULL,
    unit          TEXT NOT NULL,
    sample        TEXT NOT NULL,
    method        TEXT NOT NULL,
    analyst       TEXT NOT NULL,
    collected_by  TEXT NOT NULL,
    analyzed      TEXT NOT NULL,
    mdl           TEXT NOT NULL,
    rl            TEXT NOT NULL,
    note          TEXT NOT NULL,
    raw           TEXT NOT NULL,        -- the whole line where its cells could not be told apart
    reason        TEXT NOT NULL REFERENCES aside_reason (reason),
    explanation   TEXT NOT NULL,        -- one line for people
    mark          INTEGER NOT NULL      -- a 63-bit FNV-1a hash of all the above
) STRICT;

CREATE INDEX aside_by_day ON aside (day);

-- ---- the plant's descriptions: every row of every file, as written, for each time one was put in force -----
-- In all of them:
--   batch    the description they belong to
--   place    the row's place in the whole description, from 1
--   builtin  1: of the program's own parameter catalogue
--   file     the file's name as given
--   line     its line
--   mark     a 63-bit FNV-1a hash of the row
-- and then the columns of the file; NULL where the file did not have the column.

CREATE TABLE plant_field (
    batch INTEGER NOT NULL REFERENCES description (batch), place INTEGER NOT NULL,
    builtin INTEGER NOT NULL, file TEXT NOT NULL, line INTEGER NOT NULL, mark INTEGER NOT NULL,
    field TEXT, value TEXT,
    PRIMARY KEY (batch, place)
) STRICT, WITHOUT ROWID;

CREATE TABLE plant_point (
    batch INTEGER NOT NULL REFERENCES description (batch), place INTEGER NOT NULL,
    builtin INTEGER NOT NULL, file TEXT NOT NULL, line INTEGER NOT NULL, mark INTEGER NOT NULL,
    point TEXT, name TEXT, role TEXT, outfall TEXT,
    PRIMARY KEY (batch, place)
) STRICT, WITHOUT ROWID;

CREATE TABLE plant_parameter (
    batch INTEGER NOT NULL REFERENCES description (batch), place INTEGER NOT NULL,
    builtin INTEGER NOT NULL, file TEXT NOT NULL, line INTEGER NOT NULL, mark INTEGER NOT NULL,
    parameter TEXT, name TEXT, unit TEXT, decimals TEXT, day_rule TEXT, average TEXT, code TEXT,
    low TEXT, high TEXT, mdl TEXT, rl TEXT, rules TEXT,
    PRIMARY KEY (batch, place)
) STRICT, WITHOUT ROWID;

CREATE TABLE plant_basin (
    batch INTEGER NOT NULL REFERENCES description (batch), place INTEGER NOT NULL,
    builtin INTEGER NOT NULL, file TEXT NOT NULL, line INTEGER NOT NULL, mark INTEGER NOT NULL,
    basin TEXT, kind TEXT, point TEXT, volume TEXT, volume_unit TEXT, area TEXT, area_unit TEXT,
    weir TEXT, weir_unit TEXT, "from" TEXT, "to" TEXT,
    PRIMARY KEY (batch, place)
) STRICT, WITHOUT ROWID;

CREATE TABLE plant_limit (
    batch INTEGER NOT NULL REFERENCES description (batch), place INTEGER NOT NULL,
    builtin INTEGER NOT NULL, file TEXT NOT NULL, line INTEGER NOT NULL, mark INTEGER NOT NULL,
    outfall TEXT, point TEXT, parameter TEXT, basis TEXT, statistic TEXT, bound TEXT, "limit" TEXT,
    unit TEXT, season TEXT, "from" TEXT, "to" TEXT, "when" TEXT, samples TEXT, sample TEXT,
    allowed TEXT, ceiling TEXT, "group" TEXT, rules TEXT, note TEXT,
    PRIMARY KEY (batch, place)
) STRICT, WITHOUT ROWID;

CREATE TABLE plant_meter (
    batch INTEGER NOT NULL REFERENCES description (batch), place INTEGER NOT NULL,
    builtin INTEGER NOT NULL, file TEXT NOT NULL, line INTEGER NOT NULL, mark INTEGER NOT NULL,
    point TEXT, parameter TEXT, kind TEXT, rolls_at TEXT, multiplier TEXT, "from" TEXT, "to" TEXT,
    PRIMARY KEY (batch, place)
) STRICT, WITHOUT ROWID;

CREATE TABLE plant_process (
    batch INTEGER NOT NULL REFERENCES description (batch), place INTEGER NOT NULL,
    builtin INTEGER NOT NULL, file TEXT NOT NULL, line INTEGER NOT NULL, mark INTEGER NOT NULL,
    name TEXT, at TEXT, parameter TEXT, formula TEXT, argument TEXT, source TEXT, unit TEXT,
    PRIMARY KEY (batch, place)
) STRICT, WITHOUT ROWID;

-- ---- nothing is rewritten, nothing is taken out ------------------------------------------------------------

CREATE TRIGGER reading_stays BEFORE UPDATE ON reading
BEGIN SELECT RAISE(ABORT, 'readings are never rewritten'); END;
CREATE TRIGGER reading_kept BEFORE DELETE ON reading
BEGIN SELECT RAISE(ABORT, 'readings are never taken out'); END;
CREATE TRIGGER revision_stays BEFORE UPDATE ON revision
BEGIN SELECT RAISE(ABORT, 'readings are never rewritten'); END;
CREATE TRIGGER revision_kept BEFORE DELETE ON revision
BEGIN SELECT RAISE(ABORT, 'readings are never taken out'); END;
CREATE TRIGGER aside_stays BEFORE UPDATE ON aside
BEGIN SELECT RAISE(ABORT, 'rows set aside are never rewritten'); END;
CREATE TRIGGER aside_kept BEFORE DELETE ON aside
BEGIN SELECT RAISE(ABORT, 'rows set aside are never taken out'); END;
CREATE TRIGGER batch_stays BEFORE UPDATE ON batch
BEGIN SELECT RAISE(ABORT, 'batches are never rewritten'); END;
CREATE TRIGGER batch_kept BEFORE DELETE ON batch
BEGIN SELECT RAISE(ABORT, 'batches are never taken out'); END;
CREATE TRIGGER load_stays BEFORE UPDATE ON load
BEGIN SELECT RAISE(ABORT, 'batches are never rewritten'); END;
CREATE TRIGGER load_kept BEFORE DELETE ON load
BEGIN SELECT RAISE(ABORT, 'batches are never taken out'); END;
CREATE TRIGGER chain_stays BEFORE UPDATE ON chain
BEGIN SELECT RAISE(ABORT, 'the chain is never rewritten'); END;
CREATE TRIGGER chain_kept BEFORE DELETE ON chain
BEGIN SELECT RAISE(ABORT, 'the chain is never shortened'); END;
CREATE TRIGGER description_stays BEFORE UPDATE ON description
BEGIN SELECT RAISE(ABORT, 'descriptions are never rewritten'); END;
CREATE TRIGGER description_kept BEFORE DELETE ON description
BEGIN SELECT RAISE(ABORT, 'descriptions are never taken out'); END;
CREATE TRIGGER plant_field_stays BEFORE UPDATE ON plant_field
BEGIN SELECT RAISE(ABORT, 'descriptions are never rewritten'); END;
CREATE TRIGGER plant_field_kept BEFORE DELETE ON plant_field
BEGIN SELECT RAISE(ABORT, 'descriptions are never taken out'); END;
CREATE TRIGGER plant_point_stays BEFORE UPDATE ON plant_point
BEGIN SELECT RAISE(ABORT, 'descriptions are never rewritten'); END;
CREATE TRIGGER plant_point_kept BEFORE DELETE ON plant_point
BEGIN SELECT RAISE(ABORT, 'descriptions are never taken out'); END;
CREATE TRIGGER plant_parameter_stays BEFORE UPDATE ON plant_parameter
BEGIN SELECT RAISE(ABORT, 'descriptions are never rewritten'); END;
CREATE TRIGGER plant_parameter_kept BEFORE DELETE ON plant_parameter
BEGIN SELECT RAISE(ABORT, 'descriptions are never taken out'); END;
CREATE TRIGGER plant_basin_stays BEFORE UPDATE ON plant_basin
BEGIN SELECT RAISE(ABORT, 'descriptions are never rewritten'); END;
CREATE TRIGGER plant_basin_kept BEFORE DELETE ON plant_basin
BEGIN SELECT RAISE(ABORT, 'descriptions are never taken out'); END;
CREATE TRIGGER plant_limit_stays BEFORE UPDATE ON plant_limit
BEGIN SELECT RAISE(ABORT, 'descriptions are never rewritten'); END;
CREATE TRIGGER plant_limit_kept BEFORE DELETE ON plant_limit
BEGIN SELECT RAISE(ABORT, 'descriptions are never taken out'); END;
CREATE TRIGGER plant_meter_stays BEFORE UPDATE ON plant_meter
BEGIN SELECT RAISE(ABORT, 'descriptions are never rewritten'); END;
CREATE TRIGGER plant_meter_kept BEFORE DELETE ON plant_meter
BEGIN SELECT RAISE(ABORT, 'descriptions are never taken out'); END;
CREATE TRIGGER plant_process_stays BEFORE UPDATE ON plant_process
BEGIN SELECT RAISE(ABORT, 'descriptions are never rewritten'); END;
CREATE TRIGGER plant_process_kept BEFORE DELETE ON plant_process
BEGIN SELECT RAISE(ABORT, 'descriptions are never taken out'); END;
CREATE TRIGGER point_code_stays BEFORE UPDATE ON point_code
BEGIN SELECT RAISE(ABORT, 'names that readings use are never rewritten'); END;
CREATE TRIGGER point_code_kept BEFORE DELETE ON point_code
BEGIN SELECT RAISE(ABORT, 'names that readings use are never taken out'); END;
CREATE TRIGGER parameter_code_stays BEFORE UPDATE ON parameter_code
BEGIN SELECT RAISE(ABORT, 'names that readings use are never rewritten'); END;
CREATE TRIGGER parameter_code_kept BEFORE DELETE ON parameter_code
BEGIN SELECT RAISE(ABORT, 'names that readings use are never taken out'); END;
CREATE TRIGGER unit_code_stays BEFORE UPDATE ON unit_code
BEGIN SELECT RAISE(ABORT, 'names that readings use are never rewritten'); END;
CREATE TRIGGER unit_code_kept BEFORE DELETE ON unit_code
BEGIN SELECT RAISE(ABORT, 'names that readings use are never taken out'); END;
CREATE TRIGGER series_stays BEFORE UPDATE ON series
BEGIN SELECT RAISE(ABORT, 'names that readings use are never rewritten'); END;
CREATE TRIGGER series_kept BEFORE DELETE ON series
BEGIN SELECT RAISE(ABORT, 'names that readings use are never taken out'); END;
CREATE TRIGGER detail_stays BEFORE UPDATE ON detail
BEGIN SELECT RAISE(ABORT, 'names that readings use are never rewritten'); END;
CREATE TRIGGER detail_kept BEFORE DELETE ON detail
BEGIN SELECT RAISE(ABORT, 'names that readings use are never taken out'); END;

-- ---- for people: the sqlite3 shell ----------------------------------------------------------------------------

-- Every reading in force. `number` is for quick sums only (a binary number); `value` is what was written.
CREATE VIEW readings AS
SELECT date(r.day * 86400, 'unixepoch') AS date,
       CASE WHEN r.minute < 0 THEN ''
            ELSE format('%02d:%02d', r.minute / 60, r.minute % 60) END AS time,
       p.name AS point, q.name AS parameter, r.value, u.name AS unit, w.word AS qualifier,
       CAST(r.coefficient || 'e-' || r.scale AS REAL) AS number,
       s.sample, d.mdl, d.rl, d.method, d.analyst, d.collected_by, d.analyzed, d.note,
       coalesce(l.file, '') AS file, r.line, r.version, r.batch, r.id
FROM reading r
JOIN series s ON s.id = r.series
JOIN point_code p ON p.id = s.point
JOIN parameter_code q ON q.id = s.parameter
JOIN detail d ON d.id = r.detail
JOIN unit_code u ON u.id = d.unit
JOIN qualifier w ON w.id = r.qualifier
LEFT JOIN load l ON l.batch = r.batch
WHERE r.qualifier <> 7
  AND NOT EXISTS (SELECT 1 FROM reading n WHERE n.series = r.series AND n.day = r.day
                  AND n.minute = r.minute AND n.version > r.version);

-- Days with their readings in one line. The mean is a plain one of the numbers as written, a less-than
-- counted at its number; the program's own daily value follows the parameter's day rule, exactly.
CREATE VIEW daily AS
SELECT date, point, parameter, unit, count(*) AS readings, sum(qualifier = 'less') AS less_thans,
       min(number) AS low, max(number) AS high, avg(number) AS mean
FROM readings
WHERE number IS NOT NULL
GROUP BY date, point, parameter, unit;

-- Every value that replaced another, who did it, when and why.
CREATE VIEW revisions AS
SELECT date(r.day * 86400, 'unixepoch') AS date,
       CASE WHEN r.minute < 0 THEN ''
            ELSE format('%02d:%02d', r.minute / 60, r.minute % 60) END AS time,
       p.name AS point, q.name AS parameter, s.sample, o.value AS old, ou.name AS old_unit,
       CASE WHEN r.qualifier = 7 THEN 'withdrawn' ELSE r.value END AS new, u.name AS unit,
       b.who, b.at AS "when", coalesce(l.reason, '') AS reason, coalesce(l.file, '') AS file, r.line,
       r.version, r.batch
FROM revision v
JOIN reading r ON r.id = v.reading
JOIN reading o ON o.id = v.replaced
JOIN series s ON s.id = r.series
JOIN point_code p ON p.id = s.point
JOIN parameter_code q ON q.id = s.parameter
JOIN detail d ON d.id = r.detail
JOIN unit_code u ON u.id = d.unit
JOIN detail od ON od.id = o.detail
JOIN unit_code ou ON ou.id = od.unit
JOIN batch b ON b.id = r.batch
LEFT JOIN load l ON l.batch = r.batch;

-- Everything that was ever done to the book.
CREATE VIEW batches AS
SELECT b.id AS batch, b.kind, coalesce(l.file, '') AS file, b.at AS "when", b.who,
       coalesce(l.reason, d.reason, '') AS reason, coalesce(l.rows, d.rows) AS rows, l.accepted,
       l.present, l.revised, l.aside AS set_aside, lower(hex(c.head)) AS head
FROM batch b
LEFT JOIN load l ON l.batch = b.id
LEFT JOIN description d ON d.batch = b.id
LEFT JOIN chain c ON c.batch = b.id;

CREATE VIEW rows_set_aside AS
SELECT l.file, a.line, a.column_number, a.reason, a.explanation, a.date, a.time, a.point, a.parameter,
       a.value, a.unit, a.sample, a.method, a.analyst, a.collected_by, a.analyzed, a.mdl, a.rl, a.note,
       a.raw, a.batch, a.id
FROM aside a
LEFT JOIN load l ON l.batch = a.batch;

-- The description in force, file by file, as written.
CREATE VIEW plant AS
SELECT field, value FROM plant_field
WHERE batch = (SELECT max(batch) FROM description) ORDER BY place;

CREATE VIEW points AS
SELECT point, name, role, outfall FROM plant_point
WHERE batch = (SELECT max(batch) FROM description) ORDER BY place;

-- A row of the plant's own fills over what the built-in row of the same name says.
CREATE VIEW parameters AS
SELECT parameter, name, unit, decimals, day_rule, average, code, low, high, mdl, rl, rules,
       CASE builtin WHEN 1 THEN 'built-in' ELSE 'plant' END AS stated_by
FROM plant_parameter
WHERE batch = (SELECT max(batch) FROM description) ORDER BY place;

CREATE VIEW basins AS
SELECT basin, kind, point, volume, volume_unit, area, area_unit, weir, weir_unit, "from", "to"
FROM plant_basin
WHERE batch = (SELECT max(batch) FROM description) ORDER BY place;

CREATE VIEW limits AS
SELECT outfall, point, parameter, basis, statistic, bound, "limit", unit, season, "from", "to", "when",
       samples, sample, allowed, ceiling, "group", rules, note
FROM plant_limit
WHERE batch = (SELECT max(batch) FROM description) ORDER BY place;

CREATE VIEW meters AS
SELECT point, parameter, kind, rolls_at, multiplier, "from", "to"
FROM plant_meter
WHERE batch = (SELECT max(batch) FROM description) ORDER BY place;

CREATE VIEW process AS
SELECT name, at, parameter, formula, argument, source, unit
FROM plant_process
WHERE batch = (SELECT max(batch) FROM description) ORDER BY place;
