-- The book, format 3: what people do to a book beside loading: readings corrected, batches taken
-- back, remarks, answers to doubts.
--
-- Each is a batch of its own with author and time. Nothing is rewritten for it: a corrected reading
-- is a new version, and so is one that was taken back.

PRAGMA user_version = 3;

INSERT INTO batch_kind (kind, meaning) VALUES
    ('amend', 'one reading corrected or taken back'),
    ('withdraw', 'a load or bench sheet taken back'),
    ('remark', 'a remark on days'),
    ('remark-withdraw', 'a remark taken back'),
    ('answer', 'an answer to a doubt');

-- Of the batches amend, withdraw and remark-withdraw.
CREATE TABLE act (
    batch         INTEGER PRIMARY KEY REFERENCES batch (id),
    reason        TEXT NOT NULL
                  CONSTRAINT act_reason CHECK (reason <> ''),
    subject       INTEGER REFERENCES batch (id)  -- the batch that is taken back; NULL for an amend
                  CONSTRAINT act_subject CHECK (subject IS NULL OR subject < batch),
    readings      INTEGER NOT NULL  -- new versions that it made
                  CONSTRAINT act_readings CHECK (readings >= 0),
    first_reading INTEGER NOT NULL, -- they are this id and the readings - 1 next
    mark          INTEGER NOT NULL  -- a 63-bit FNV-1a hash of all the above
) STRICT;

-- Nothing is taken back twice.
CREATE UNIQUE INDEX act_by_subject ON act (subject);

CREATE TABLE remark (
    batch     INTEGER PRIMARY KEY REFERENCES batch (id),
    kind      TEXT NOT NULL     -- 'cause', 'remedy', 'event'
              CONSTRAINT remark_kind CHECK (kind <> ''),
    event     TEXT NOT NULL,    -- 'bypass', 'spill', 'outage', 'wet-weather', 'other'; '' for no event
    first_day INTEGER NOT NULL
              CONSTRAINT remark_first_day CHECK (first_day BETWEEN -25567 AND 84005),
    last_day  INTEGER NOT NULL
              CONSTRAINT remark_last_day CHECK (last_day BETWEEN first_day AND 84005),
    point     TEXT NOT NULL,    -- '' where it is about all; here and below
    parameter TEXT NOT NULL,
    statistic TEXT NOT NULL,
    text      TEXT NOT NULL
              CONSTRAINT remark_text CHECK (text <> ''),
    mark      INTEGER NOT NULL, -- a 63-bit FNV-1a hash of all the above
    CONSTRAINT remark_event CHECK ((event <> '') = (kind = 'event'))
) STRICT;

CREATE INDEX remark_by_day ON remark (first_day, last_day);
-- The longest: how far before a day one can begin that still touches it.
CREATE INDEX remark_by_length ON remark (last_day - first_day);

CREATE TABLE answer (
    batch  INTEGER PRIMARY KEY REFERENCES batch (id),
    doubt  TEXT NOT NULL      -- which; the newest answer to it is in force
           CONSTRAINT answer_doubt CHECK (doubt <> ''),
    reason TEXT NOT NULL
           CONSTRAINT answer_reason CHECK (reason <> ''),
    mark   INTEGER NOT NULL   -- a 63-bit FNV-1a hash of all the above
) STRICT;

CREATE INDEX answer_by_doubt ON answer (doubt, batch);

CREATE TRIGGER act_stays BEFORE UPDATE ON act
BEGIN SELECT RAISE(ABORT, 'batches are never rewritten'); END;
CREATE TRIGGER act_kept BEFORE DELETE ON act
BEGIN SELECT RAISE(ABORT, 'batches are never taken out'); END;
CREATE TRIGGER remark_stays BEFORE UPDATE ON remark
BEGIN SELECT RAISE(ABORT, 'remarks are never rewritten'); END;
CREATE TRIGGER remark_kept BEFORE DELETE ON remark
BEGIN SELECT RAISE(ABORT, 'remarks are never taken out'); END;
CREATE TRIGGER answer_stays BEFORE UPDATE ON answer
BEGIN SELECT RAISE(ABORT, 'answers are never rewritten'); END;
CREATE TRIGGER answer_kept BEFORE DELETE ON answer
BEGIN SELECT RAISE(ABORT, 'answers are never taken out'); END;

-- ---- for people: the sqlite3 shell ----------------------------------------------------------------

-- Everything that was ever done to the book.
DROP VIEW batches;
CREATE VIEW batches AS
SELECT b.id AS batch, b.kind, coalesce(l.file, '') AS file, b.at AS "when", b.who,
       coalesce(l.reason, d.reason, t.reason, m.text, w.reason, '') AS reason,
       coalesce(l.rows, d.rows, t.readings) AS rows, l.accepted, l.present,
       coalesce(l.revised, t.readings) AS revised, l.aside AS set_aside, lower(hex(c.head)) AS head
FROM batch b
LEFT JOIN load l ON l.batch = b.id
LEFT JOIN description d ON d.batch = b.id
LEFT JOIN act t ON t.batch = b.id
LEFT JOIN remark m ON m.batch = b.id
LEFT JOIN answer w ON w.batch = b.id
LEFT JOIN chain c ON c.batch = b.id;

-- Every value that replaced another, who did it, when and why.
DROP VIEW revisions;
CREATE VIEW revisions AS
SELECT date(r.day * 86400, 'unixepoch') AS date,
       CASE WHEN r.minute < 0 THEN ''
            ELSE format('%02d:%02d', r.minute / 60, r.minute % 60) END AS time,
       p.name AS point, q.name AS parameter, s.sample,
       CASE WHEN o.qualifier = 7 THEN 'withdrawn' ELSE o.value END AS old, ou.name AS old_unit,
       CASE WHEN r.qualifier = 7 THEN 'withdrawn' ELSE r.value END AS new, u.name AS unit,
       b.who, b.at AS "when", coalesce(l.reason, t.reason, '') AS reason,
       coalesce(l.file, '') AS file, r.line, r.version, r.batch
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
LEFT JOIN load l ON l.batch = r.batch
LEFT JOIN act t ON t.batch = r.batch;

-- Readings corrected, batches and remarks taken back.
CREATE VIEW acts AS
SELECT t.batch, b.kind, b.at AS "when", b.who, t.reason, t.subject, t.readings
FROM act t
JOIN batch b ON b.id = t.batch;

CREATE VIEW remarks AS
SELECT m.batch AS number, m.kind, m.event, date(m.first_day * 86400, 'unixepoch') AS "from",
       date(m.last_day * 86400, 'unixepoch') AS "to", m.point, m.parameter, m.statistic, m.text,
       b.who, b.at AS "when", coalesce(t.reason, '') AS withdrawn
FROM remark m
JOIN batch b ON b.id = m.batch
LEFT JOIN act t ON t.subject = m.batch;

-- Answers to doubts; the newest of a doubt is in force.
CREATE VIEW answers AS
SELECT w.doubt, w.reason, b.who, b.at AS "when", w.batch
FROM answer w
JOIN batch b ON b.id = w.batch;
