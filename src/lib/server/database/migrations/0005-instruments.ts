/**
 * Versions of instruments with who saved them, files whose columns cannot be told, re-measures with what they bring,
 * and which measurement of a spectrum is the current one. Every statement can be run again.
 */
export const name = '0005-instruments';

const ID = 'UUID NOT NULL PRIMARY KEY';
const NOW = 'DATETIME(6) NOT NULL DEFAULT UTC_TIMESTAMP(6)';
const TABLE = 'ENGINE=InnoDB DEFAULT CHARSET=utf8mb4 COLLATE=utf8mb4_unicode_ci';

export const statements: string[] = [
  `ALTER TABLE instruments ADD COLUMN IF NOT EXISTS created_by UUID NULL,
    ADD COLUMN IF NOT EXISTS note VARCHAR(500) NOT NULL DEFAULT ''`,
  `ALTER TABLE instruments ADD CONSTRAINT instruments_author
    FOREIGN KEY IF NOT EXISTS (created_by) REFERENCES users (id)`,
  // the shape of a file that waits for its columns: SHA-256 of the names of all its columns
  `ALTER TABLE files MODIFY COLUMN state ENUM('waiting', 'read', 'failed', 'needs assignment') NOT NULL DEFAULT 'waiting',
    ADD COLUMN IF NOT EXISTS shape CHAR(64) CHARACTER SET ascii NULL,
    ADD INDEX IF NOT EXISTS by_shape (programme_id, shape)`,
  // which version of the instrument a measurement was made by
  `ALTER TABLE measurements ADD COLUMN IF NOT EXISTS instrument_id UUID NULL`,
  `ALTER TABLE measurements ADD CONSTRAINT measurements_instrument
    FOREIGN KEY IF NOT EXISTS (instrument_id) REFERENCES instruments (id)`,
  `ALTER TABLE spectra ADD COLUMN IF NOT EXISTS current_measurement_id UUID NULL`,
  `ALTER TABLE spectra ADD CONSTRAINT spectra_current
    FOREIGN KEY IF NOT EXISTS (current_measurement_id) REFERENCES measurements (id)`,
  `UPDATE spectra s SET s.current_measurement_id = (SELECT MAX(m.id) FROM measurements m WHERE m.spectrum_id = s.id)
    WHERE s.current_measurement_id IS NULL AND s.state = 'measured'`,
  `UPDATE measurements m JOIN spectra s ON s.id = m.spectrum_id JOIN files f ON f.id = s.file_id
    SET m.instrument_id = f.instrument_id WHERE m.instrument_id IS NULL AND f.instrument_id IS NOT NULL`,
  `CREATE TABLE IF NOT EXISTS remeasures (id ${ID}, programme_id UUID NOT NULL, night_id UUID NULL,
    reason VARCHAR(500) NOT NULL DEFAULT '', engine_version VARCHAR(40) NOT NULL,
    state ENUM('running', 'done', 'cancelled') NOT NULL DEFAULT 'running', created_by UUID NOT NULL, created_at ${NOW},
    finished_at DATETIME(6) NULL, KEY by_programme (programme_id, created_at), KEY by_state (state),
    FOREIGN KEY (programme_id) REFERENCES programmes (id), FOREIGN KEY (night_id) REFERENCES nights (id),
    FOREIGN KEY (created_by) REFERENCES users (id)) ${TABLE}`,
  `CREATE TABLE IF NOT EXISTS remeasured_spectra (remeasure_id UUID NOT NULL, spectrum_id UUID NOT NULL,
    state ENUM('waiting', 'measured', 'skipped', 'failed', 'cancelled') NOT NULL DEFAULT 'waiting',
    before_id UUID NULL, after_id UUID NULL, problem JSON NULL, tries TINYINT UNSIGNED NOT NULL DEFAULT 0,
    PRIMARY KEY (remeasure_id, spectrum_id), KEY by_state (remeasure_id, state), KEY (spectrum_id),
    FOREIGN KEY (remeasure_id) REFERENCES remeasures (id), FOREIGN KEY (spectrum_id) REFERENCES spectra (id),
    FOREIGN KEY (before_id) REFERENCES measurements (id), FOREIGN KEY (after_id) REFERENCES measurements (id)) ${TABLE}`,
  // append-only: an undo is an acceptance that takes another back
  `CREATE TABLE IF NOT EXISTS acceptances (id ${ID}, remeasure_id UUID NOT NULL, user_id UUID NOT NULL,
    filter JSON NOT NULL, undoes UUID NULL UNIQUE, created_at ${NOW}, KEY (remeasure_id),
    FOREIGN KEY (remeasure_id) REFERENCES remeasures (id), FOREIGN KEY (user_id) REFERENCES users (id),
    FOREIGN KEY (undoes) REFERENCES acceptances (id)) ${TABLE}`,
  `CREATE TABLE IF NOT EXISTS accepted_measurements (acceptance_id UUID NOT NULL, spectrum_id UUID NOT NULL,
    from_id UUID NULL, to_id UUID NULL, PRIMARY KEY (acceptance_id, spectrum_id), KEY (spectrum_id),
    FOREIGN KEY (acceptance_id) REFERENCES acceptances (id), FOREIGN KEY (spectrum_id) REFERENCES spectra (id),
    FOREIGN KEY (from_id) REFERENCES measurements (id), FOREIGN KEY (to_id) REFERENCES measurements (id)) ${TABLE}`,
];
