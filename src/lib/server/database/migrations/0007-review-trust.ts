/**
 * What tells how far looks can be trusted: looks without the engine's answer, who has seen what others said, planted
 * spectra, and mentions with their daily letter. Every statement can be run again.
 */
export const name = '0007-review-trust';

const NOW = 'DATETIME(6) NOT NULL DEFAULT UTC_TIMESTAMP(6)';
const TABLE = 'ENGINE=InnoDB DEFAULT CHARSET=utf8mb4 COLLATE=utf8mb4_unicode_ci';

export const statements: string[] = [
  // the seed stays in the database: who looks without the engine's answer follows from it and cannot be guessed
  `CREATE TABLE IF NOT EXISTS review_settings (programme_id UUID NOT NULL PRIMARY KEY,
    hidden_share DOUBLE NOT NULL DEFAULT 0, planted_rate DOUBLE NOT NULL DEFAULT 0,
    seed CHAR(64) CHARACTER SET ascii NOT NULL, changed_by UUID NULL, changed_at ${NOW},
    FOREIGN KEY (programme_id) REFERENCES programmes (id), FOREIGN KEY (changed_by) REFERENCES users (id)) ${TABLE}`,
  // null: given before these were kept
  `ALTER TABLE verdicts ADD COLUMN IF NOT EXISTS engine_hidden BOOLEAN NULL,
    ADD COLUMN IF NOT EXISTS seen_others BOOLEAN NULL`,
  `CREATE TABLE IF NOT EXISTS sights (spectrum_id UUID NOT NULL, user_id UUID NOT NULL, seen_at ${NOW},
    PRIMARY KEY (spectrum_id, user_id), KEY by_person (user_id), FOREIGN KEY (spectrum_id) REFERENCES spectra (id),
    FOREIGN KEY (user_id) REFERENCES users (id)) ${TABLE}`,
  `CREATE TABLE IF NOT EXISTS planted_spectra (spectrum_id UUID NOT NULL PRIMARY KEY, programme_id UUID NOT NULL,
    night_id UUID NOT NULL, place INT UNSIGNED NOT NULL, kind ENUM('simulated', 'shifted', 'empty') NOT NULL,
    redshift DOUBLE NULL, donor_id UUID NOT NULL, seed BIGINT UNSIGNED NOT NULL, detail JSON NOT NULL, created_at ${NOW},
    UNIQUE one_place (night_id, place), KEY by_programme (programme_id),
    FOREIGN KEY (spectrum_id) REFERENCES spectra (id), FOREIGN KEY (programme_id) REFERENCES programmes (id),
    FOREIGN KEY (night_id) REFERENCES nights (id), FOREIGN KEY (donor_id) REFERENCES spectra (id)) ${TABLE}`,
  `CREATE TABLE IF NOT EXISTS comment_mentions (comment_id UUID NOT NULL, user_id UUID NOT NULL,
    done_at DATETIME(6) NULL, letter_id UUID NULL, PRIMARY KEY (comment_id, user_id), KEY by_person (user_id, done_at),
    KEY by_letter (letter_id), FOREIGN KEY (comment_id) REFERENCES comments (id),
    FOREIGN KEY (user_id) REFERENCES users (id), FOREIGN KEY (letter_id) REFERENCES letters (id)) ${TABLE}`,
  `ALTER TABLE letters MODIFY COLUMN kind ENUM('invitation', 'night report', 'mention digest') NOT NULL,
    ADD COLUMN IF NOT EXISTS day DATE NULL, ADD UNIQUE INDEX IF NOT EXISTS one_digest (kind, user_id, day)`,
  `ALTER TABLE users ADD COLUMN IF NOT EXISTS mention_letters BOOLEAN NOT NULL DEFAULT TRUE`,
];
