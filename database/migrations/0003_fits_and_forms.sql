-- The model fitted to each line that was read, and the published forms it follows as well.

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
