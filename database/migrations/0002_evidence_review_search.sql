-- Every line as it was read, review with a log whose past cannot be changed unseen, search, and search over bands.

-- The sheet's size, so that a reading can be drawn even where the file's bytes are not kept.
ALTER TABLE reading ADD COLUMN sheet_width REAL CHECK (sheet_width > 0);
ALTER TABLE reading ADD COLUMN sheet_height REAL CHECK (sheet_height > 0);
ALTER TABLE reading ADD COLUMN sheet_unit TEXT CHECK (sheet_unit IN ('px', 'pt'));
ALTER TABLE reading ADD COLUMN sheet_pages INTEGER CHECK (sheet_pages >= 1);
-- Hash of all rows of the reading; NULL for what was stored before there was one.
ALTER TABLE reading ADD COLUMN evidence_sha256 BLOB CHECK (length(evidence_sha256) = 32);
CREATE INDEX reading_by_evidence ON reading (evidence_sha256);
ALTER TABLE finding ADD COLUMN permitted TEXT CHECK (permitted IN ('at_least', 'at_most'));
ALTER TABLE finding ADD COLUMN time_s REAL CHECK (time_s > 0);

-- One line of a reading and the curve made of it. Of typed points nothing is known of a trace: NULL.
-- devices: ["key", ...]; tolerance: {"current": [lower, upper], ...} where the worksheet states one.
CREATE TABLE read_curve (
    reading_id INTEGER NOT NULL REFERENCES reading,
    seq INTEGER NOT NULL CHECK (seq >= 1),
    curve_id INTEGER NOT NULL REFERENCES curve,
    label TEXT NOT NULL,
    devices TEXT NOT NULL,
    tolerance TEXT,
    origin TEXT NOT NULL CHECK (origin IN ('found', 'guided', 'vector', 'typed')),
    confidence REAL CHECK (confidence BETWEEN 0 AND 1),
    correlation_length REAL CHECK (correlation_length >= 0),
    starts_at_frame INTEGER CHECK (starts_at_frame IN (0, 1)),
    ends_at_frame INTEGER CHECK (ends_at_frame IN (0, 1)),
    colour TEXT CHECK (colour GLOB '#[0-9a-f][0-9a-f][0-9a-f][0-9a-f][0-9a-f][0-9a-f]'),
    width REAL CHECK (width >= 0),
    is_boundary INTEGER CHECK (is_boundary IN (0, 1)),
    PRIMARY KEY (reading_id, seq)
) STRICT, WITHOUT ROWID;

-- A place on the sheet with its standard deviation there, and the current and value it has by the axes.
CREATE TABLE read_point (
    reading_id INTEGER NOT NULL,
    curve_seq INTEGER NOT NULL,
    seq INTEGER NOT NULL CHECK (seq >= 1),
    x REAL,
    y REAL,
    sd REAL CHECK (sd >= 0),
    current REAL NOT NULL CHECK (current > 0),
    value REAL NOT NULL CHECK (value > 0),
    sd_current REAL CHECK (sd_current >= 0),
    sd_value REAL CHECK (sd_value >= 0),
    PRIMARY KEY (reading_id, curve_seq, seq),
    FOREIGN KEY (reading_id, curve_seq) REFERENCES read_curve (reading_id, seq)
) STRICT, WITHOUT ROWID;

CREATE TABLE read_gap (
    reading_id INTEGER NOT NULL,
    curve_seq INTEGER NOT NULL,
    seq INTEGER NOT NULL CHECK (seq >= 1),
    start_x REAL NOT NULL,
    start_y REAL NOT NULL,
    end_x REAL NOT NULL,
    end_y REAL NOT NULL,
    PRIMARY KEY (reading_id, curve_seq, seq),
    FOREIGN KEY (reading_id, curve_seq) REFERENCES read_curve (reading_id, seq)
) STRICT, WITHOUT ROWID;

-- The grid lines that the calibration was measured on; sd and width in the sheet's unit.
CREATE TABLE grid_line (
    reading_id INTEGER NOT NULL REFERENCES reading,
    seq INTEGER NOT NULL CHECK (seq >= 1),
    axis TEXT NOT NULL CHECK (axis IN ('current', 'value')),
    value REAL NOT NULL,
    sd REAL NOT NULL CHECK (sd >= 0),
    width REAL NOT NULL CHECK (width >= 0),
    darkness REAL NOT NULL,
    PRIMARY KEY (reading_id, seq)
) STRICT, WITHOUT ROWID;

CREATE TABLE grid_point (
    reading_id INTEGER NOT NULL,
    line_seq INTEGER NOT NULL,
    seq INTEGER NOT NULL CHECK (seq >= 1),
    x REAL NOT NULL,
    y REAL NOT NULL,
    PRIMARY KEY (reading_id, line_seq, seq),
    FOREIGN KEY (reading_id, line_seq) REFERENCES grid_line (reading_id, seq)
) STRICT, WITHOUT ROWID;

-- What happened to which revision. Each entry's hash covers the entry and the hash before it, so that no past entry can
-- be changed, taken out or put in unseen. origin: the entry in the library it was imported from, as JSON.
CREATE TABLE log (
    seq INTEGER PRIMARY KEY,
    at TEXT NOT NULL,
    name TEXT NOT NULL,
    action TEXT NOT NULL CHECK (action IN ('stored', 'reviewed', 'noted', 'imported')),
    revision_id INTEGER NOT NULL REFERENCES revision,
    state TEXT NOT NULL CHECK (state IN ('draft', 'checked', 'released', 'withdrawn')),
    reason TEXT NOT NULL,
    origin TEXT,
    sha256 BLOB NOT NULL CHECK (length(sha256) = 32)
) STRICT;
CREATE INDEX log_of_revision ON log (revision_id);

CREATE TRIGGER log_is_kept BEFORE UPDATE ON log
BEGIN SELECT RAISE(ABORT, 'an entry of the log is never changed'); END;
CREATE TRIGGER log_is_not_deleted BEFORE DELETE ON log
BEGIN SELECT RAISE(ABORT, 'an entry of the log is never deleted'); END;
CREATE TRIGGER revision_state_is_logged BEFORE UPDATE OF state ON revision
WHEN NEW.state IS NOT (
    SELECT state FROM log WHERE seq = (SELECT max(seq) FROM log) AND revision_id = OLD.revision_id
)
BEGIN SELECT RAISE(ABORT, 'a state is never changed without an entry in the log'); END;

-- What led to a number is kept like the number.
CREATE TRIGGER source_is_kept BEFORE UPDATE ON source
BEGIN SELECT RAISE(ABORT, 'the bytes of a sheet are never changed'); END;
CREATE TRIGGER source_is_not_deleted BEFORE DELETE ON source
BEGIN SELECT RAISE(ABORT, 'the bytes of a sheet are never deleted'); END;
CREATE TRIGGER reading_is_kept BEFORE UPDATE ON reading
BEGIN SELECT RAISE(ABORT, 'a stored reading is never changed'); END;
CREATE TRIGGER reading_is_not_deleted BEFORE DELETE ON reading
BEGIN SELECT RAISE(ABORT, 'a stored reading is never deleted'); END;
CREATE TRIGGER finding_is_kept BEFORE UPDATE ON finding
BEGIN SELECT RAISE(ABORT, 'a stored finding is never changed'); END;
CREATE TRIGGER finding_is_not_deleted BEFORE DELETE ON finding
BEGIN SELECT RAISE(ABORT, 'a stored finding is never deleted'); END;
CREATE TRIGGER read_curve_is_kept BEFORE UPDATE ON read_curve
BEGIN SELECT RAISE(ABORT, 'a stored reading is never changed'); END;
CREATE TRIGGER read_curve_is_not_deleted BEFORE DELETE ON read_curve
BEGIN SELECT RAISE(ABORT, 'a stored reading is never deleted'); END;
CREATE TRIGGER read_point_is_kept BEFORE UPDATE ON read_point
BEGIN SELECT RAISE(ABORT, 'a stored reading is never changed'); END;
CREATE TRIGGER read_point_is_not_deleted BEFORE DELETE ON read_point
BEGIN SELECT RAISE(ABORT, 'a stored reading is never deleted'); END;

-- What follows can be made anew from the tables above at any time: it only makes finding fast.

-- The current revision of each device that has one, with what is searched and sorted by. Of its band: the fast edge
-- covers currents from holds_from_a on, the slow edge answers up to trips_to_a.
CREATE TABLE current_device (
    device_id INTEGER PRIMARY KEY REFERENCES device,
    revision_id INTEGER NOT NULL REFERENCES revision,
    device_key TEXT NOT NULL UNIQUE,
    revision INTEGER NOT NULL,
    state TEXT NOT NULL,
    kind TEXT NOT NULL,
    characteristic TEXT,
    standard TEXT,
    maker TEXT,
    series TEXT,
    rated_current_a REAL,
    rated_residual_current_a REAL,
    words TEXT NOT NULL,
    is_adjustable INTEGER NOT NULL CHECK (is_adjustable IN (0, 1)),
    holds_from_a REAL NOT NULL,
    trips_to_a REAL NOT NULL
) STRICT;
CREATE INDEX current_device_by_kind ON current_device (kind, device_key);
CREATE INDEX current_device_by_characteristic ON current_device (characteristic, device_key);
CREATE INDEX current_device_by_maker ON current_device (maker, device_key);
CREATE INDEX current_device_by_series ON current_device (series, device_key);
CREATE INDEX current_device_by_rating ON current_device (rated_current_a, device_key);

-- How selective the indexes are in a large library, so that the same search goes the same way in every library.
ANALYZE sqlite_schema;
INSERT INTO sqlite_stat1 (tbl, idx, stat) VALUES
    ('current_device', 'current_device_by_kind', '100000 20000 1'),
    ('current_device', 'current_device_by_characteristic', '100000 8000 1'),
    ('current_device', 'current_device_by_maker', '100000 5000 1'),
    ('current_device', 'current_device_by_series', '100000 300 1'),
    ('current_device', 'current_device_by_rating', '100000 4000 1');

CREATE VIRTUAL TABLE device_text USING fts5 (
    words, content = 'current_device', content_rowid = 'device_id', detail = 'none', tokenize = 'unicode61'
);

-- Currents in A between which a device's band lies at fixed times, step by step (see curvelab/library/extent.py): up to
-- which it surely and at most perhaps holds for that time, from which it surely and at least perhaps trips within it.
CREATE TABLE band_extent (
    step INTEGER NOT NULL,
    device_id INTEGER NOT NULL,
    holds_surely_a REAL NOT NULL,
    holds_perhaps_a REAL NOT NULL,
    trips_surely_a REAL NOT NULL,
    trips_perhaps_a REAL NOT NULL,
    PRIMARY KEY (step, device_id)
) STRICT, WITHOUT ROWID;

CREATE VIEW review_log AS
SELECT
    log.seq,
    device.device_key,
    revision.number AS revision,
    log.at,
    log.name,
    log.action,
    log.state,
    log.reason
FROM log
JOIN revision ON revision.revision_id = log.revision_id
JOIN device ON device.device_id = revision.device_id;
