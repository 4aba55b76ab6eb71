/**
 * What the night report, the account page and invitations need: the sky-line check of each spectrum, when sessions and
 * tokens began, invitations to a programme, and letters to send. Every statement can be run again.
 */
export const name = '0003-night-report';

const NOW = 'DATETIME(6) NOT NULL DEFAULT UTC_TIMESTAMP(6)';
const TABLE = 'ENGINE=InnoDB DEFAULT CHARSET=utf8mb4 COLLATE=utf8mb4_unicode_ci';

export const statements: string[] = [
  `ALTER TABLE spectra ADD COLUMN IF NOT EXISTS sky_offset_kms DOUBLE NULL,
    ADD COLUMN IF NOT EXISTS sky_scatter_kms DOUBLE NULL, ADD COLUMN IF NOT EXISTS mid_exposure DATETIME(6) NULL`,
  `ALTER TABLE sessions ADD COLUMN IF NOT EXISTS started_at ${NOW}`,
  `ALTER TABLE api_tokens ADD COLUMN IF NOT EXISTS name VARCHAR(100) NOT NULL DEFAULT ''`,
  `ALTER TABLE invitations ADD COLUMN IF NOT EXISTS email VARCHAR(254) NULL,
    ADD COLUMN IF NOT EXISTS programme_id UUID NULL, ADD COLUMN IF NOT EXISTS roles JSON NULL,
    ADD COLUMN IF NOT EXISTS invited_by UUID NULL, ADD COLUMN IF NOT EXISTS withdrawn_at DATETIME(6) NULL,
    ADD INDEX IF NOT EXISTS by_programme (programme_id)`,
  `ALTER TABLE invitations ADD CONSTRAINT invitations_programme
    FOREIGN KEY IF NOT EXISTS (programme_id) REFERENCES programmes (id)`,
  `ALTER TABLE invitations ADD CONSTRAINT invitations_inviter
    FOREIGN KEY IF NOT EXISTS (invited_by) REFERENCES users (id)`,
  `CREATE TABLE IF NOT EXISTS letters (id UUID NOT NULL PRIMARY KEY, kind ENUM('invitation', 'night report') NOT NULL,
    invitation_id UUID NULL, night_id UUID NULL, user_id UUID NULL,
    state ENUM('waiting', 'sent', 'failed') NOT NULL DEFAULT 'waiting', tries INT UNSIGNED NOT NULL DEFAULT 0,
    problem VARCHAR(500) NULL, sent_at DATETIME(6) NULL, created_at ${NOW}, KEY (invitation_id),
    UNIQUE one_report (night_id, user_id), FOREIGN KEY (invitation_id) REFERENCES invitations (id),
    FOREIGN KEY (night_id) REFERENCES nights (id), FOREIGN KEY (user_id) REFERENCES users (id)) ${TABLE}`,
];
