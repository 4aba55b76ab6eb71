/**
 * One place on the sky as one target with all its names, lists of targets, which spectra share photons, which were
 * replaced by a new reduction, and combinations of repeats. Every statement can be run again.
 */
export const name = '0006-targets';

const ID = 'UUID NOT NULL PRIMARY KEY';
const NOW = 'DATETIME(6) NOT NULL DEFAULT UTC_TIMESTAMP(6)';
const TABLE = 'ENGINE=InnoDB DEFAULT CHARSET=utf8mb4 COLLATE=utf8mb4_unicode_ci';
const DIGEST = 'CHAR(64) CHARACTER SET ascii NULL';
/** A name folded to one spelling: see domain/target-name. */
const FOLDED = 'VARCHAR(200) CHARACTER SET utf8mb4 COLLATE utf8mb4_bin NOT NULL';

export const statements: string[] = [
  `ALTER TABLE programmes ADD COLUMN IF NOT EXISTS target_radius_arcsec DOUBLE NOT NULL DEFAULT 1`,
  // the larger the more urgent; a place may be known by several names, and a name may stand at two places
  `ALTER TABLE targets ADD COLUMN IF NOT EXISTS priority DOUBLE NULL,
    ADD COLUMN IF NOT EXISTS is_listed BOOLEAN NOT NULL DEFAULT FALSE,
    ADD INDEX IF NOT EXISTS by_name (programme_id, name)`,
  `ALTER TABLE targets DROP INDEX IF EXISTS programme_id`,
  `CREATE TABLE IF NOT EXISTS target_names (target_id UUID NOT NULL, folded ${FOLDED}, programme_id UUID NOT NULL,
    name VARCHAR(200) CHARACTER SET utf8mb4 COLLATE utf8mb4_bin NOT NULL, PRIMARY KEY (target_id, folded),
    KEY by_name (programme_id, folded), FOREIGN KEY (target_id) REFERENCES targets (id),
    FOREIGN KEY (programme_id) REFERENCES programmes (id)) ${TABLE}`,
  `INSERT IGNORE INTO target_names (target_id, folded, programme_id, name)
    SELECT t.id, LOWER(REPLACE(REPLACE(REPLACE(t.name, '−', '-'), ' ', ''), '_', '')), t.programme_id, t.name FROM targets t`,
  // whoever makes targets of a programme holds its row, so that two workers never make one place twice
  `CREATE TABLE IF NOT EXISTS target_registers (programme_id UUID NOT NULL PRIMARY KEY,
    FOREIGN KEY (programme_id) REFERENCES programmes (id)) ${TABLE}`,
  `CREATE TABLE IF NOT EXISTS target_lists (id ${ID}, programme_id UUID NOT NULL, name VARCHAR(255) NOT NULL,
    row_count INT UNSIGNED NOT NULL, notes JSON NOT NULL, created_by UUID NOT NULL, created_at ${NOW},
    KEY by_programme (programme_id, created_at), FOREIGN KEY (programme_id) REFERENCES programmes (id),
    FOREIGN KEY (created_by) REFERENCES users (id)) ${TABLE}`,
  `CREATE TABLE IF NOT EXISTS target_entries (list_id UUID NOT NULL, row_index INT UNSIGNED NOT NULL,
    target_id UUID NOT NULL, name VARCHAR(200) NOT NULL, ra_degrees DOUBLE NULL, dec_degrees DOUBLE NULL,
    priority DOUBLE NULL, magnitude DOUBLE NULL, magnitude_band VARCHAR(60) NULL, magnitudes JSON NOT NULL,
    PRIMARY KEY (list_id, row_index), KEY by_target (target_id), FOREIGN KEY (list_id) REFERENCES target_lists (id),
    FOREIGN KEY (target_id) REFERENCES targets (id)) ${TABLE}`,
  `ALTER TABLE spectra ADD COLUMN IF NOT EXISTS kind ENUM('exposure', 'stack', 'combination') NOT NULL DEFAULT 'exposure',
    ADD COLUMN IF NOT EXISTS exposure_start DATETIME(6) NULL, ADD COLUMN IF NOT EXISTS exposure_end DATETIME(6) NULL,
    ADD COLUMN IF NOT EXISTS exposure_key ${DIGEST}, ADD COLUMN IF NOT EXISTS superseded_by UUID NULL,
    ADD COLUMN IF NOT EXISTS position_doubt JSON NULL, ADD INDEX IF NOT EXISTS by_exposure (exposure_key)`,
  `ALTER TABLE spectra ADD CONSTRAINT spectra_newer_reduction
    FOREIGN KEY IF NOT EXISTS (superseded_by) REFERENCES spectra (id)`,
  `ALTER TABLE files ADD COLUMN IF NOT EXISTS superseded_by UUID NULL`,
  `ALTER TABLE files ADD CONSTRAINT files_newer_reduction
    FOREIGN KEY IF NOT EXISTS (superseded_by) REFERENCES files (id)`,
  // a stack or a combination, and the spectra whose photons are in it
  `CREATE TABLE IF NOT EXISTS spectrum_parts (whole_id UUID NOT NULL, part_id UUID NOT NULL,
    PRIMARY KEY (whole_id, part_id), KEY (part_id), FOREIGN KEY (whole_id) REFERENCES spectra (id),
    FOREIGN KEY (part_id) REFERENCES spectra (id)) ${TABLE}`,
  // origin of a combined spectrum: the digest of its parts; its file is made by the installation itself
  `CREATE TABLE IF NOT EXISTS combinations (file_id UUID NOT NULL PRIMARY KEY, programme_id UUID NOT NULL,
    target_id UUID NOT NULL, origin CHAR(64) CHARACTER SET ascii NOT NULL, parts JSON NOT NULL, notes JSON NOT NULL,
    created_by UUID NOT NULL, created_at ${NOW}, UNIQUE (programme_id, origin), KEY (target_id),
    FOREIGN KEY (file_id) REFERENCES files (id), FOREIGN KEY (programme_id) REFERENCES programmes (id),
    FOREIGN KEY (target_id) REFERENCES targets (id), FOREIGN KEY (created_by) REFERENCES users (id)) ${TABLE}`,
];
