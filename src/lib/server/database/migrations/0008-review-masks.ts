/** What a verdict rests on besides its redshift: stretches left out of the fit, and a second object's redshift. */
export const name = '0008-review-masks';

export const statements: string[] = [
  // a table of its own, so that most verdicts, which have neither, carry nothing
  `CREATE TABLE IF NOT EXISTS verdict_details (verdict_id UUID NOT NULL PRIMARY KEY, masks JSON NOT NULL,
    second_redshift DOUBLE NULL, second_redshift_error DOUBLE NULL,
    FOREIGN KEY (verdict_id) REFERENCES verdicts (id))
    ENGINE=InnoDB DEFAULT CHARSET=utf8mb4 COLLATE=utf8mb4_unicode_ci`,
];
