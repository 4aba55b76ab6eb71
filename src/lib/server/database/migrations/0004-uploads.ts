/**
 * Submitting in parts: files that were announced and have not come, uploads in chunks, and archives with what became of
 * them. Every statement can be run again.
 */
export const name = '0004-uploads';

const NOW = 'DATETIME(6) NOT NULL DEFAULT UTC_TIMESTAMP(6)';
const TABLE = 'ENGINE=InnoDB DEFAULT CHARSET=utf8mb4 COLLATE=utf8mb4_unicode_ci';
const DIGEST = 'CHAR(64) CHARACTER SET ascii NULL';

export const statements: string[] = [
  `CREATE TABLE IF NOT EXISTS expected_files (night_id UUID NOT NULL,
    path VARCHAR(500) CHARACTER SET utf8mb4 COLLATE utf8mb4_bin NOT NULL, size_bytes BIGINT UNSIGNED NOT NULL,
    sha256 ${DIGEST}, user_id UUID NOT NULL, announced_at ${NOW}, PRIMARY KEY (night_id, path),
    KEY by_digest (night_id, sha256), KEY by_age (announced_at), FOREIGN KEY (night_id) REFERENCES nights (id),
    FOREIGN KEY (user_id) REFERENCES users (id)) ${TABLE}`,
  `CREATE TABLE IF NOT EXISTS uploads (id UUID NOT NULL PRIMARY KEY, night_id UUID NOT NULL, user_id UUID NOT NULL,
    name VARCHAR(255) NOT NULL, size_bytes BIGINT UNSIGNED NOT NULL, sha256 ${DIGEST},
    received_bytes BIGINT UNSIGNED NOT NULL DEFAULT 0,
    state ENUM('open', 'unpacking', 'done', 'failed') NOT NULL DEFAULT 'open',
    writer UUID NULL, writer_until DATETIME(6) NULL, archive_kind VARCHAR(10) NULL, file_id UUID NULL,
    already BOOLEAN NOT NULL DEFAULT FALSE, unpacked JSON NULL, problems JSON NOT NULL,
    tries TINYINT UNSIGNED NOT NULL DEFAULT 0, created_at ${NOW}, changed_at ${NOW}, KEY by_night (night_id, state),
    KEY by_age (state, changed_at), FOREIGN KEY (night_id) REFERENCES nights (id),
    FOREIGN KEY (user_id) REFERENCES users (id), FOREIGN KEY (file_id) REFERENCES files (id)) ${TABLE}`,
  `ALTER TABLE night_files ADD INDEX IF NOT EXISTS by_name (night_id, name)`,
];
