-- The schema as it is today: what all migrations together give (a test compares them).

PRAGMA application_id = 1129665110;

-- A device is a key and a kind; everything else may change from one revision to the next.
CREATE TABLE device (
    device_id INTEGER PRIMARY KEY,
    device_key TEXT NOT NULL UNIQUE
        CHECK (length(device_key) BETWEEN 1 AND 64 AND device_key NOT GLOB '*[^A-Za-z0-9_-]*'),
    kind TEXT NOT NULL CHECK (kind IN ('fuse', 'mcb', 'mccb', 'acb', 'rcd', 'rcbo', 'relay', 'switch'))
) STRICT;

-- The bytes of a sheet's file, kept once.
CREATE TABLE source (
    sha256 TEXT PRIMARY KEY CHECK (length(sha256) = 64),
    bytes BLOB NOT NULL
) STRICT;

-- One plot of one page of one file; the file is known by its hash whether or not its bytes are kept.
CREATE TABLE sheet (
    sheet_id INTEGER PRIMARY KEY,
    sha256 TEXT NOT NULL,
    page INTEGER NOT NULL CHECK (page >= 1),
    plot INTEGER NOT NULL CHECK (plot >= 1),
    file TEXT NOT NULL,
    UNIQUE (sha256, page, plot)
) STRICT;

-- What led to curves: the worksheet as written, its document, the calibration, and the program that read it.
CREATE TABLE reading (
    reading_id INTEGER PRIMARY KEY,
    statement_sha256 BLOB NOT NULL CHECK (length(statement_sha256) = 32),
    sheet_id INTEGER REFERENCES sheet,
    program_version TEXT NOT NULL,
    title TEXT NOT NULL,
    issue TEXT NOT NULL,
    date TEXT NOT NULL,
    maker TEXT NOT NULL,
    note TEXT NOT NULL,
    worksheet TEXT NOT NULL,
    axes TEXT,
    sheet_width REAL CHECK (sheet_width > 0),
    sheet_height REAL CHECK (sheet_height > 0),
    sheet_unit TEXT CHECK (sheet_unit IN ('px', 'pt')),
    sheet_pages INTEGER CHECK (sheet_pages >= 1),
    evidence_sha256 BLOB CHECK (length(evidence_sha256) = 32)
) STRICT;
CREATE INDEX reading_by_evidence ON reading (evidence_sha256);

CREATE TABLE reading_warning (
    reading_id INTEGER NOT NULL REFERENCES reading,
    seq INTEGER NOT NULL,
    code TEXT NOT NULL,
    text TEXT NOT NULL,
    x REAL,
    y REAL,
    is_accepted INTEGER NOT NULL CHECK (is_accepted IN (0, 1)),
    accepted_reason TEXT,
    accepted_name TEXT,
    PRIMARY KEY (reading_id, seq)
) STRICT, WITHOUT ROWID;

-- "limit" and value are in unit; value and its 95 % interval are NULL where the curve does not reach.
CREATE TABLE finding (
    reading_id INTEGER NOT NULL REFERENCES reading,
    seq INTEGER NOT NULL,
    device_key TEXT NOT NULL,
    standard TEXT NOT NULL,
    clause TEXT NOT NULL,
    requirement TEXT NOT NULL,
    limit_value REAL NOT NULL,
    unit TEXT NOT NULL,
    value REAL,
    lower REAL,
    upper REAL,
    outcome TEXT NOT NULL CHECK (outcome IN ('meets', 'fails', 'undecided', 'at limit', 'not covered')),
    is_advisory INTEGER NOT NULL CHECK (is_advisory IN (0, 1)),
    source TEXT NOT NULL,
    rule TEXT NOT NULL,
    current REAL,
    base TEXT,
    note TEXT NOT NULL,
    permitted TEXT CHECK (permitted IN ('at_least', 'at_most')),
    time_s REAL CHECK (time_s > 0),
    PRIMARY KEY (reading_id, seq)
) STRICT, WITHOUT ROWID;

-- One immutable state of a device: its nameplate. Only the state of review may change.
CREATE TABLE revision (
    revision_id INTEGER PRIMARY KEY,
    device_id INTEGER NOT NULL REFERENCES device,
    number INTEGER NOT NULL CHECK (number >= 1),
    state TEXT NOT NULL DEFAULT 'draft' CHECK (state IN ('draft', 'checked', 'released', 'withdrawn')),
    content_sha256 BLOB NOT NULL CHECK (length(content_sha256) = 32),
    created_at TEXT NOT NULL,
    author TEXT NOT NULL,
    reason TEXT NOT NULL,
    program_version TEXT NOT NULL,
    reading_id INTEGER REFERENCES reading,
    characteristic TEXT,
    standard TEXT,
    standard_edition TEXT,
    rated_current_a REAL CHECK (rated_current_a > 0),
    rated_residual_current_a REAL CHECK (rated_residual_current_a > 0),
    residual_waveform TEXT,
    residual_delay TEXT,
    rated_voltage_v REAL CHECK (rated_voltage_v > 0),
    poles INTEGER CHECK (poles >= 1),
    frequency_hz REAL CHECK (frequency_hz >= 0),
    ambient_reference_c REAL,
    utilisation_category TEXT,
    maker TEXT,
    series TEXT,
    catalogue TEXT,
    UNIQUE (device_id, number)
) STRICT;

CREATE TABLE breaking (
    revision_id INTEGER NOT NULL REFERENCES revision,
    seq INTEGER NOT NULL,
    quantity TEXT NOT NULL,
    value_a REAL NOT NULL CHECK (value_a > 0),
    voltage_v REAL CHECK (voltage_v > 0),
    supply TEXT CHECK (supply IN ('ac', 'dc')),
    duration_s REAL CHECK (duration_s > 0),
    PRIMARY KEY (revision_id, seq)
) STRICT, WITHOUT ROWID;

-- An adjustable setting: a range, or steps in setting_step.
CREATE TABLE setting (
    revision_id INTEGER NOT NULL REFERENCES revision,
    name TEXT NOT NULL,
    seq INTEGER NOT NULL,
    base TEXT,
    from_value REAL,
    to_value REAL,
    at_current TEXT,
    can_be_off INTEGER NOT NULL CHECK (can_be_off IN (0, 1)),
    PRIMARY KEY (revision_id, name)
) STRICT, WITHOUT ROWID;

CREATE TABLE setting_step (
    revision_id INTEGER NOT NULL,
    name TEXT NOT NULL,
    seq INTEGER NOT NULL,
    step_value REAL NOT NULL,
    PRIMARY KEY (revision_id, name, seq),
    FOREIGN KEY (revision_id, name) REFERENCES setting
) STRICT, WITHOUT ROWID;

CREATE TABLE derating (
    revision_id INTEGER NOT NULL REFERENCES revision,
    seq INTEGER NOT NULL,
    element TEXT NOT NULL,
    ambient_c REAL NOT NULL,
    factor REAL NOT NULL CHECK (factor > 0),
    PRIMARY KEY (revision_id, seq)
) STRICT, WITHOUT ROWID;

-- A curve is known by the hash of its content, so that revisions and devices share it. settings: {"ir": 0.8} it is drawn for.
CREATE TABLE curve (
    curve_id INTEGER PRIMARY KEY,
    content_sha256 BLOB NOT NULL UNIQUE CHECK (length(content_sha256) = 32),
    element TEXT NOT NULL CHECK (
        element IN ('overload', 'delayed', 'instantaneous', 'earth', 'neutral', 'override', 'residual', 'whole')
    ),
    edge TEXT NOT NULL CHECK (edge IN ('fast', 'slow', 'mean')),
    meaning TEXT CHECK (meaning IN ('pre_arcing', 'operating', 'unlatching', 'relay_output', 'clearing')),
    quantity TEXT NOT NULL CHECK (quantity IN ('time', 'let_through', 'peak')),
    base TEXT NOT NULL CHECK (base IN ('A', 'xIn', 'xIr', 'xIsd', 'xIi', 'xIg', 'xIdn')),
    basis TEXT NOT NULL CHECK (basis IN ('sheet', 'standard', 'declared')),
    leaves_top INTEGER NOT NULL CHECK (leaves_top IN (0, 1)),
    source TEXT NOT NULL,
    sheet_id INTEGER REFERENCES sheet,
    start TEXT CHECK (start IN ('cold', 'hot')),
    time_kind TEXT CHECK (time_kind IN ('real', 'virtual')),
    supply TEXT CHECK (supply IN ('ac', 'dc')),
    voltage_v REAL,
    frequency_hz REAL,
    ambient_c REAL,
    poles_loaded INTEGER,
    settings TEXT NOT NULL DEFAULT '{}',
    time_setting TEXT,
    time_setting_at REAL CHECK (time_setting_at > 0)
) STRICT;

-- The points of a curve in order: straight lines in log-log within a part. value: s, A2s or A by the curve's quantity.
CREATE TABLE point (
    curve_id INTEGER NOT NULL REFERENCES curve,
    part INTEGER NOT NULL CHECK (part >= 1),
    seq INTEGER NOT NULL CHECK (seq >= 1),
    current REAL NOT NULL CHECK (current > 0),
    value REAL NOT NULL CHECK (value > 0),
    sd_current REAL CHECK (sd_current >= 0),
    sd_value REAL CHECK (sd_value >= 0),
    sd_common REAL CHECK (sd_common >= 0),
    PRIMARY KEY (curve_id, part, seq)
) STRICT, WITHOUT ROWID;

-- Which curves a revision has, and the reading that gave each.
CREATE TABLE revision_curve (
    revision_id INTEGER NOT NULL REFERENCES revision,
    seq INTEGER NOT NULL,
    curve_id INTEGER NOT NULL REFERENCES curve,
    reading_id INTEGER REFERENCES reading,
    PRIMARY KEY (revision_id, seq)
) STRICT, WITHOUT ROWID;

-- Nothing stored is ever changed: a correction is a new revision.
CREATE TRIGGER device_is_kept BEFORE UPDATE ON device
BEGIN SELECT RAISE(ABORT, 'a stored device is never changed'); END;
CREATE TRIGGER device_is_not_deleted BEFORE DELETE ON device
BEGIN SELECT RAISE(ABORT, 'a stored device is never deleted'); END;
CREATE TRIGGER revision_is_kept BEFORE UPDATE OF
    revision_id, device_id, number, content_sha256, created_at, author, reason, program_version, reading_id,
    characteristic, standard, standard_edition, rated_current_a, rated_residual_current_a, residual_waveform,
    residual_delay, rated_voltage_v, poles, frequency_hz, ambient_reference_c, utilisation_category, maker, series,
    catalogue
ON revision
BEGIN SELECT RAISE(ABORT, 'a stored revision is never changed'); END;
CREATE TRIGGER revision_is_not_deleted BEFORE DELETE ON revision
BEGIN SELECT RAISE(ABORT, 'a stored revision is never deleted'); END;
CREATE TRIGGER revision_curve_is_kept BEFORE UPDATE ON revision_curve
BEGIN SELECT RAISE(ABORT, 'a stored revision is never changed'); END;
CREATE TRIGGER revision_curve_is_not_deleted BEFORE DELETE ON revision_curve
BEGIN SELECT RAISE(ABORT, 'a stored revision is never changed'); END;
CREATE TRIGGER curve_is_kept BEFORE UPDATE ON curve
BEGIN SELECT RAISE(ABORT, 'a stored curve is never changed'); END;
CREATE TRIGGER curve_is_not_deleted BEFORE DELETE ON curve
BEGIN SELECT RAISE(ABORT, 'a stored curve is never deleted'); END;
CREATE TRIGGER point_is_kept BEFORE UPDATE ON point
BEGIN SELECT RAISE(ABORT, 'a stored curve is never changed'); END;
CREATE TRIGGER point_is_not_deleted BEFORE DELETE ON point
BEGIN SELECT RAISE(ABORT, 'a stored curve is never changed'); END;

-- What other calculators read: stable for good, described in README.md and columns.csv. Columns may be added at the end.
CREATE VIEW device_index AS
SELECT
    device.device_key,
    revision.number AS revision,
    revision.revision_id IS (
        SELECT candidate.revision_id
        FROM revision AS candidate
        WHERE candidate.device_id = revision.device_id AND candidate.state <> 'withdrawn'
        ORDER BY candidate.state = 'released' DESC, candidate.number DESC
        LIMIT 1
    ) AS is_current,
    revision.state,
    device.kind,
    revision.characteristic,
    revision.standard,
    revision.maker,
    revision.series,
    revision.rated_current_a,
    revision.rated_residual_current_a,
    revision.residual_waveform,
    revision.residual_delay,
    revision.rated_voltage_v,
    revision.poles,
    revision.standard_edition,
    revision.frequency_hz,
    revision.ambient_reference_c,
    revision.utilisation_category,
    revision.catalogue,
    revision.created_at,
    revision.author,
    revision.reason,
    revision.program_version
FROM device
JOIN revision ON revision.device_id = device.device_id;

CREATE VIEW trip_points AS
SELECT
    device.device_key,
    revision.number AS revision,
    point.curve_id,
    curve.element,
    curve.edge,
    curve.meaning,
    point.part,
    point.seq,
    curve.base,
    point.current,
    point.value AS time_s,
    curve.time_setting,
    curve.time_setting_at,
    point.sd_current,
    point.sd_value AS sd_time,
    point.sd_common,
    curve.sheet_id
FROM device
JOIN revision ON revision.device_id = device.device_id
JOIN revision_curve ON revision_curve.revision_id = revision.revision_id
JOIN curve ON curve.curve_id = revision_curve.curve_id
JOIN point ON point.curve_id = curve.curve_id
WHERE curve.quantity = 'time';

CREATE VIEW let_through_points AS
SELECT
    device.device_key,
    revision.number AS revision,
    point.curve_id,
    curve.quantity,
    curve.edge,
    curve.voltage_v,
    point.part,
    point.seq,
    curve.base,
    point.current,
    point.value,
    point.sd_current,
    point.sd_value,
    point.sd_common,
    curve.sheet_id,
    curve.element,
    curve.meaning
FROM device
JOIN revision ON revision.device_id = device.device_id
JOIN revision_curve ON revision_curve.revision_id = revision.revision_id
JOIN curve ON curve.curve_id = revision_curve.curve_id
JOIN point ON point.curve_id = curve.curve_id
WHERE curve.quantity <> 'time';

CREATE VIEW curve_conditions AS
SELECT
    device.device_key,
    revision.number AS revision,
    curve.curve_id,
    curve.start,
    curve.time_kind,
    curve.supply,
    curve.voltage_v,
    curve.frequency_hz,
    curve.ambient_c,
    curve.poles_loaded,
    curve.settings,
    curve.leaves_top,
    curve.basis,
    curve.source
FROM device
JOIN revision ON revision.device_id = device.device_id
JOIN revision_curve ON revision_curve.revision_id = revision.revision_id
JOIN curve ON curve.curve_id = revision_curve.curve_id;

CREATE VIEW device_settings AS
SELECT
    device.device_key,
    revision.number AS revision,
    setting.name,
    setting.base,
    setting.from_value,
    setting.to_value,
    setting_step.step_value,
    setting.can_be_off,
    setting.at_current
FROM device
JOIN revision ON revision.device_id = device.device_id
JOIN setting ON setting.revision_id = revision.revision_id
LEFT JOIN setting_step ON setting_step.revision_id = setting.revision_id AND setting_step.name = setting.name;

CREATE VIEW device_breaking AS
SELECT
    device.device_key,
    revision.number AS revision,
    breaking.quantity,
    breaking.value_a,
    breaking.voltage_v,
    breaking.supply,
    breaking.duration_s
FROM device
JOIN revision ON revision.device_id = device.device_id
JOIN breaking ON breaking.revision_id = revision.revision_id;

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

-- fit: JSON of the spline pieces with the covariance of their coefficients, kinks, gaps, noise and uncertainty budget.
CREATE TABLE read_fit (
    reading_id INTEGER NOT NULL,
    curve_seq INTEGER NOT NULL,
    fit TEXT NOT NULL,
    PRIMARY KEY (reading_id, curve_seq),
    FOREIGN KEY (reading_id, curve_seq) REFERENCES read_curve (reading_id, seq)
) STRICT, WITHOUT ROWID;

-- also: the same line under other names; rivals: forms the points do not rule out; both ["name", ...]. rms in decades.
CREATE TABLE read_form (
    reading_id INTEGER NOT NULL,
    curve_seq INTEGER NOT NULL,
    seq INTEGER NOT NULL CHECK (seq >= 1),
    name TEXT NOT NULL,
    standard TEXT NOT NULL,
    from_current REAL NOT NULL CHECK (from_current > 0),
    to_current REAL NOT NULL CHECK (to_current > 0),
    rms REAL NOT NULL CHECK (rms >= 0),
    excess REAL NOT NULL,
    also TEXT NOT NULL,
    rivals TEXT NOT NULL,
    PRIMARY KEY (reading_id, curve_seq, seq),
    FOREIGN KEY (reading_id, curve_seq) REFERENCES read_fit (reading_id, curve_seq)
) STRICT, WITHOUT ROWID;

CREATE TABLE read_form_parameter (
    reading_id INTEGER NOT NULL,
    curve_seq INTEGER NOT NULL,
    form_seq INTEGER NOT NULL,
    seq INTEGER NOT NULL CHECK (seq >= 1),
    name TEXT NOT NULL,
    value REAL NOT NULL,
    sd REAL NOT NULL CHECK (sd >= 0),
    PRIMARY KEY (reading_id, curve_seq, form_seq, seq),
    FOREIGN KEY (reading_id, curve_seq, form_seq) REFERENCES read_form (reading_id, curve_seq, seq)
) STRICT, WITHOUT ROWID;

CREATE TRIGGER read_fit_is_kept BEFORE UPDATE ON read_fit
BEGIN SELECT RAISE(ABORT, 'a stored reading is never changed'); END;
CREATE TRIGGER read_fit_is_not_deleted BEFORE DELETE ON read_fit
BEGIN SELECT RAISE(ABORT, 'a stored reading is never deleted'); END;
CREATE TRIGGER read_form_is_kept BEFORE UPDATE ON read_form
BEGIN SELECT RAISE(ABORT, 'a stored reading is never changed'); END;
CREATE TRIGGER read_form_is_not_deleted BEFORE DELETE ON read_form
BEGIN SELECT RAISE(ABORT, 'a stored reading is never deleted'); END;
CREATE TRIGGER read_form_parameter_is_kept BEFORE UPDATE ON read_form_parameter
BEGIN SELECT RAISE(ABORT, 'a stored reading is never changed'); END;
CREATE TRIGGER read_form_parameter_is_not_deleted BEFORE DELETE ON read_form_parameter
BEGIN SELECT RAISE(ABORT, 'a stored reading is never deleted'); END;

CREATE VIEW curve_forms AS
SELECT
    device.device_key,
    revision.number AS revision,
    read_curve.curve_id,
    read_form.seq AS form,
    read_form.name,
    read_form.standard,
    read_form.rivals = '[]' AS is_claimed,
    read_form.from_current,
    read_form.to_current,
    read_form_parameter.name AS parameter,
    read_form_parameter.value,
    read_form_parameter.sd,
    read_form.rms
FROM device
JOIN revision ON revision.device_id = device.device_id
JOIN revision_curve ON revision_curve.revision_id = revision.revision_id
JOIN read_curve ON read_curve.reading_id = revision_curve.reading_id AND read_curve.curve_id = revision_curve.curve_id
JOIN read_form ON read_form.reading_id = read_curve.reading_id AND read_form.curve_seq = read_curve.seq
JOIN read_form_parameter
    ON read_form_parameter.reading_id = read_form.reading_id
    AND read_form_parameter.curve_seq = read_form.curve_seq
    AND read_form_parameter.form_seq = read_form.seq;
