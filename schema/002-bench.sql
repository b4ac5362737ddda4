-- The book, format 2: bench sheets with their raw values, and the stops of the shift round.
--
-- A bench sheet is a batch like a load, with a row in table load: its results are readings. Beside
-- it stand the raw values they were worked from, every row of the sheet's file as written.

PRAGMA user_version = 2;

INSERT INTO batch_kind (kind, meaning) VALUES
    ('bench', 'one bench sheet');

CREATE TABLE bench (
    batch      INTEGER PRIMARY KEY REFERENCES load (batch),
    raw_values INTEGER NOT NULL  -- how many
               CONSTRAINT bench_raw_values CHECK (raw_values >= 0),
    first_raw  INTEGER NOT NULL   -- they are this id and the raw_values - 1 next
) STRICT;

CREATE TABLE bench_value (
    id       INTEGER PRIMARY KEY,  -- in the order of loading, without gaps
    batch    INTEGER NOT NULL REFERENCES batch (id),
    line     INTEGER NOT NULL,     -- of the batch's file
    sheet    TEXT NOT NULL,        -- the cells as written, '' where there was none
    date     TEXT NOT NULL,        -- the day sampled
    time     TEXT NOT NULL,
    point    TEXT NOT NULL,        -- '': a blank, seed or standard that serves all points
    run      TEXT NOT NULL,        -- which filter, bottle or tube row
    argument TEXT NOT NULL,        -- what was measured: 'dried'
    value    TEXT NOT NULL,
    unit     TEXT NOT NULL,        -- '': the argument's own
    mark     INTEGER NOT NULL      -- a 63-bit FNV-1a hash of all the above
) STRICT;

-- The newest value of an argument, to be offered again.
CREATE INDEX bench_value_newest ON bench_value (sheet, point, run, argument);
-- The values of one sheet's file.
CREATE INDEX bench_value_by_batch ON bench_value (batch, line);

-- As the tables of the other files of a description: 001-book.sql.
CREATE TABLE plant_round (
    batch INTEGER NOT NULL REFERENCES description (batch), place INTEGER NOT NULL,
    builtin INTEGER NOT NULL, file TEXT NOT NULL, line INTEGER NOT NULL, mark INTEGER NOT NULL,
    point TEXT, parameter TEXT, sample TEXT,
    PRIMARY KEY (batch, place)
) STRICT, WITHOUT ROWID;

CREATE TRIGGER bench_stays BEFORE UPDATE ON bench
BEGIN SELECT RAISE(ABORT, 'batches are never rewritten'); END;
CREATE TRIGGER bench_kept BEFORE DELETE ON bench
BEGIN SELECT RAISE(ABORT, 'batches are never taken out'); END;
CREATE TRIGGER bench_value_stays BEFORE UPDATE ON bench_value
BEGIN SELECT RAISE(ABORT, 'raw values are never rewritten'); END;
CREATE TRIGGER bench_value_kept BEFORE DELETE ON bench_value
BEGIN SELECT RAISE(ABORT, 'raw values are never taken out'); END;
CREATE TRIGGER plant_round_stays BEFORE UPDATE ON plant_round
BEGIN SELECT RAISE(ABORT, 'descriptions are never rewritten'); END;
CREATE TRIGGER plant_round_kept BEFORE DELETE ON plant_round
BEGIN SELECT RAISE(ABORT, 'descriptions are never taken out'); END;

-- ---- for people: the sqlite3 shell ----------------------------------------------------------------

-- Every raw value, in the order of loading.
CREATE VIEW bench_values AS
SELECT v.sheet, v.date, v.time, v.point, v.run, v.argument, v.value, v.unit,
       coalesce(l.file, '') AS file, v.line, b.who, b.at AS "when", v.batch, v.id
FROM bench_value v
JOIN batch b ON b.id = v.batch
LEFT JOIN load l ON l.batch = v.batch
ORDER BY v.id;

CREATE VIEW round AS
SELECT point, parameter, sample
FROM plant_round
WHERE batch = (SELECT max(batch) FROM description) ORDER BY place;
