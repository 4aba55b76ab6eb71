import { QueryTypes } from 'sequelize';
import type { NightMeasurement } from '$lib/domain/night';
import type { Measurement } from '$lib/domain/measurement';
import { database } from '../connection';
import { LATEST_MEASUREMENT } from './night-snapshot';
import { CURRENT_VERDICT, judgedBy } from './verdicts';

type Row = Omit<NightMeasurement, 'flags' | 'strongestLine' | 'verdict' | 'fluxUnit'> & {
  flags: string | Measurement['flags'] | null;
  fluxUnit: string | null;
  lines: string | Measurement['lines'] | null;
  verdictRedshift: number | null;
  verdictConfidence: string | null;
  verdictBy: string | null;
};

const parsed = <T>(value: T | string): T => (typeof value === 'string' ? (JSON.parse(value) as T) : value);

/**
 * Spectra of a night after an id, in the order of ids, with the newest measurement and the newest verdict. For a reader
 * who may judge, a verdict shows only where they gave one of their own: looks are blind.
 */
export async function nightMeasurementRows(
  nightId: string,
  limit: number,
  after: string | null,
  reader: { userId: string; judges: boolean },
): Promise<NightMeasurement[]> {
  const rows = await database().query<Row>(
    `SELECT s.id AS spectrum, nf.name AS source, s.extension, s.row_index AS \`row\`, s.name, s.ra_degrees AS ra,
        s.dec_degrees AS \`dec\`, s.state, s.median_signal_to_noise AS medianSignalToNoise, m.redshift,
        m.redshift_error AS redshiftError, m.redshift_error_measured AS redshiftErrorMeasured,
        m.redshift_systemic AS redshiftSystemic, m.second_redshift AS secondRedshift, m.probability, m.confidence,
        m.noise_factor AS noiseFactor, c.object_class AS objectClass, JSON_EXTRACT(m.detail, '$.flags') AS flags,
        JSON_VALUE(m.detail, '$.fluxUnit') AS fluxUnit, JSON_EXTRACT(m.detail, '$.lines') AS \`lines\`,
        v.redshift AS verdictRedshift, v.confidence AS verdictConfidence, u.name AS verdictBy
      FROM night_files nf JOIN spectra s ON s.file_id = nf.file_id
      LEFT JOIN measurements m ON m.spectrum_id = s.id AND ${LATEST_MEASUREMENT}
      LEFT JOIN candidates c ON c.measurement_id = m.id AND c.place = 0
      LEFT JOIN verdicts v ON v.id = ${CURRENT_VERDICT} AND (:judges = 0 OR ${judgedBy(':userId')})
      LEFT JOIN users u ON u.id = v.user_id
      WHERE nf.night_id = :nightId AND (:after IS NULL OR s.id > :after) ORDER BY s.id LIMIT :limit`,
    {
      replacements: { nightId, after, limit, userId: reader.userId, judges: reader.judges ? 1 : 0 },
      type: QueryTypes.SELECT,
    },
  );
  return rows.map(({ flags, lines, verdictRedshift, verdictConfidence, verdictBy, ...row }) => {
    const strongest = parsed<Measurement['lines']>(lines ?? []).reduce<Measurement['lines'][number] | null>(
      (best, line) => ((line.signalToNoise ?? 0) > (best?.signalToNoise ?? 0) ? line : best),
      null,
    );
    return {
      ...row,
      objectClass: row.redshift === null ? null : row.objectClass,
      flags: parsed<Measurement['flags']>(flags ?? []),
      strongestLine: strongest && { line: strongest.line, signalToNoise: strongest.signalToNoise ?? 0 },
      verdict: verdictBy ? { redshift: verdictRedshift, confidence: verdictConfidence, by: verdictBy } : null,
    };
  });
}
