import { QueryTypes } from 'sequelize';
import type { Flag } from '$lib/domain/flag';
import type { Measurement } from '$lib/domain/measurement';
import type { FullAnswer, NightMeasurement } from '$lib/domain/night';
import { database } from '../connection';
import { CURRENT_MEASUREMENT } from './night-snapshot';
import { LAST_WORD_RULING } from './rulings';
import { CURRENT_VERDICT, judgedBy } from './verdicts';
import { OBSERVED } from './observed';

type Row = Omit<NightMeasurement, 'flags' | 'strongestLine' | 'verdict' | 'midExposure'> & {
  midExposure: Date | string | null;
  flags: string | Flag[] | null;
  line: string | null;
  lineSignalToNoise: number | null;
  verdictRedshift: number | null;
  verdictConfidence: string | null;
  verdictBy: string | null;
  verdictOwn: number;
  detail: string | Measurement | null;
};

/** For use inside a query: `e` is the entry of the newest list that has target `t`. */
const NEWEST_ENTRY = `NOT EXISTS (SELECT 1 FROM target_entries o WHERE o.target_id = e.target_id
  AND (o.list_id > e.list_id OR (o.list_id = e.list_id AND o.row_index < e.row_index)))`;

/** Takes the place of every key that the engine fills, those of the full answer included, where a reader may not know it. */
const NO_ANSWER = {
  ...{ redshift: null, redshiftError: null, redshiftErrorMeasured: null, redshiftSystemic: null, secondRedshift: null },
  ...{ probability: null, confidence: null, objectClass: null, flags: [], noiseFactor: null, strongestLine: null },
  ...{ candidates: undefined, lines: undefined, rivals: undefined, derived: undefined, reasons: undefined },
  answerHidden: true as const,
};

/**
 * Spectra of a night after an id, in the order of ids, with the current measurement and the newest verdict, or the
 * ruling that had the last word. For a reader who may judge, it shows only where they gave one of their own: looks are
 * blind. `full` adds all that the engine said: candidates, lines, reasons.
 */
export async function nightMeasurementRows(
  nightId: string,
  limit: number,
  after: string | null,
  reader: { userId: string; judges: boolean; full: boolean; hidden: (spectrumId: string) => boolean },
): Promise<(NightMeasurement & Partial<FullAnswer>)[]> {
  const rows = await database().query<Row>(
    `SELECT s.id AS spectrum, nf.name AS source, s.extension, s.row_index AS \`row\`, s.name, s.ra_degrees AS ra,
        s.dec_degrees AS \`dec\`, s.target_id AS target, e.magnitude, e.magnitude_band AS magnitudeBand, t.priority,
        s.exposure_seconds AS exposureSeconds, s.state, s.median_signal_to_noise AS medianSignalToNoise,
        s.mid_exposure AS midExposure, s.sky_offset_kms AS skyOffsetKms, s.sky_scatter_kms AS skyScatterKms, m.redshift,
        m.redshift_error AS redshiftError, m.redshift_error_measured AS redshiftErrorMeasured,
        m.redshift_systemic AS redshiftSystemic, m.second_redshift AS secondRedshift, m.probability, m.confidence,
        m.noise_factor AS noiseFactor, m.object_class AS objectClass, m.flags, m.flux_unit AS fluxUnit,
        m.strongest_line AS line, m.strongest_line_signal_to_noise AS lineSignalToNoise, ${reader.full ? 'm.detail' : 'NULL'} AS detail,
        IF(d.id IS NULL, v.redshift, d.redshift) AS verdictRedshift,
        IF(d.id IS NULL, v.confidence, d.confidence) AS verdictConfidence, u.name AS verdictBy,
        COALESCE(d.user_id, v.user_id) = :userId AS verdictOwn
      FROM night_files nf JOIN spectra s ON s.file_id = nf.file_id
      LEFT JOIN measurements m ON m.spectrum_id = s.id AND ${CURRENT_MEASUREMENT}
      LEFT JOIN verdicts v ON v.id = ${CURRENT_VERDICT} AND (:judges = 0 OR ${judgedBy(':userId')})
      LEFT JOIN rulings d ON d.id = ${LAST_WORD_RULING}
        AND (:judges = 0 OR d.user_id = :userId OR ${judgedBy(':userId')})
      LEFT JOIN users u ON u.id = COALESCE(d.user_id, v.user_id)
      LEFT JOIN targets t ON t.id = s.target_id LEFT JOIN target_entries e ON e.target_id = t.id AND ${NEWEST_ENTRY}
      WHERE nf.night_id = :nightId AND ${OBSERVED} AND (:after IS NULL OR s.id > :after) ORDER BY s.id LIMIT :limit`,
    {
      replacements: { nightId, after, limit, userId: reader.userId, judges: reader.judges ? 1 : 0 },
      type: QueryTypes.SELECT,
    },
  );
  return rows.map(
    ({
      detail,
      midExposure,
      flags,
      line,
      lineSignalToNoise,
      verdictRedshift,
      verdictConfidence,
      verdictBy,
      verdictOwn,
      ...row
    }) => ({
      ...row,
      ...(typeof detail === 'string' ? (JSON.parse(detail) as Measurement) : detail),
      midExposure: midExposure === null ? null : new Date(midExposure).toISOString(),
      flags: typeof flags === 'string' ? (JSON.parse(flags) as Flag[]) : (flags ?? []),
      strongestLine: line === null ? null : { line, signalToNoise: lineSignalToNoise ?? 0 },
      verdict: verdictBy
        ? { redshift: verdictRedshift, confidence: verdictConfidence, by: verdictBy, own: !!verdictOwn }
        : null,
      ...(reader.hidden(row.spectrum) && NO_ANSWER),
    }),
  );
}
