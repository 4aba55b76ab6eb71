/** What people say to one another about a spectrum, and how long a look took. All append-only. */
export const name = '0002-review-together';

const ID = 'UUID NOT NULL PRIMARY KEY';
const NOW = 'DATETIME(6) NOT NULL DEFAULT UTC_TIMESTAMP(6)';
const TABLE = 'ENGINE=InnoDB DEFAULT CHARSET=utf8mb4 COLLATE=utf8mb4_unicode_ci';

export const statements: string[] = [
  `ALTER TABLE verdicts ADD COLUMN IF NOT EXISTS look_seconds DOUBLE NULL`,
  `CREATE TABLE IF NOT EXISTS rulings (id ${ID}, spectrum_id UUID NOT NULL, user_id UUID NOT NULL,
    measurement_id UUID NULL, verdict_id UUID NULL, kind ENUM('candidate', 'by hand', 'no redshift', 'withdrawn') NOT NULL,
    redshift DOUBLE NULL, redshift_error DOUBLE NULL, candidate_place TINYINT UNSIGNED NULL,
    confidence ENUM('secure', 'probable', 'ambiguous', 'none') NULL, reason TEXT NOT NULL, supersedes UUID NULL UNIQUE,
    created_at ${NOW}, KEY (spectrum_id), FOREIGN KEY (spectrum_id) REFERENCES spectra (id),
    FOREIGN KEY (user_id) REFERENCES users (id), FOREIGN KEY (measurement_id) REFERENCES measurements (id),
    FOREIGN KEY (verdict_id) REFERENCES verdicts (id), FOREIGN KEY (supersedes) REFERENCES rulings (id)) ${TABLE}`,
  `ALTER TABLE release_rows ADD COLUMN IF NOT EXISTS ruling_id UUID NULL`,
  `CREATE TABLE IF NOT EXISTS assignments (id ${ID}, spectrum_id UUID NOT NULL, user_id UUID NULL,
    assigned_by UUID NOT NULL, note TEXT NOT NULL, created_at ${NOW}, KEY (spectrum_id),
    FOREIGN KEY (spectrum_id) REFERENCES spectra (id), FOREIGN KEY (user_id) REFERENCES users (id),
    FOREIGN KEY (assigned_by) REFERENCES users (id)) ${TABLE}`,
  `CREATE TABLE IF NOT EXISTS comments (id ${ID}, spectrum_id UUID NOT NULL, user_id UUID NOT NULL, text TEXT NOT NULL,
    shown_to_all BOOLEAN NOT NULL DEFAULT FALSE, created_at ${NOW}, KEY (spectrum_id),
    FOREIGN KEY (spectrum_id) REFERENCES spectra (id), FOREIGN KEY (user_id) REFERENCES users (id)) ${TABLE}`,
];
