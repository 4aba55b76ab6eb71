import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';
import type { Confidence } from '$lib/domain/confidence';
import type { Flag } from '$lib/domain/flag';
import type { LineFit, Measurement as MeasurementBody } from '$lib/domain/measurement';
import type { VerdictKind } from '$lib/domain/verdict';
import { idColumn } from './columns';

export class MeasurementRecord extends Model<
  InferAttributes<MeasurementRecord>,
  InferCreationAttributes<MeasurementRecord>
> {
  declare id: string;
  declare spectrumId: string;
  declare engineVersion: string;
  declare settingsHash: string;
  /** The version of the instrument that the spectrum was read by. */
  declare instrumentId: CreationOptional<string | null>;
  declare lineList: string;
  declare redshift: number | null;
  declare redshiftError: number | null;
  declare redshiftErrorMeasured: number | null;
  declare redshiftSystemic: number | null;
  declare secondRedshift: number | null;
  declare probability: number;
  declare confidence: Confidence;
  declare noiseFactor: number | null;
  /** Shannon entropy of the answer over candidates and rivals, bits: what a look would settle. */
  declare entropyBits: number;
  declare objectClass: string | null;
  declare fluxUnit: string | null;
  declare flags: Flag[];
  declare strongestLine: string | null;
  declare strongestLineSignalToNoise: number | null;
  declare detail: MeasurementBody;
  declare createdAt: CreationOptional<Date>;
}

export class CandidateRecord extends Model<InferAttributes<CandidateRecord>, InferCreationAttributes<CandidateRecord>> {
  declare measurementId: string;
  declare place: number;
  declare redshift: number;
  declare redshiftError: number;
  declare probability: number;
  declare objectClass: string;
}

/** Line fits of the leading candidate; the other candidates' stand in `MeasurementRecord.detail`. */
export class LineFitRecord
  extends Model<InferAttributes<LineFitRecord>, InferCreationAttributes<LineFitRecord>>
  implements LineFit
{
  declare measurementId: string;
  declare line: string;
  /** 0, and 1 for a broad component under the same line. */
  declare component: number;
  declare wavelengthRest: number;
  declare wavelengthObserved: number;
  declare flux: number | null;
  declare fluxError: number | null;
  declare equivalentWidthRest: number | null;
  declare equivalentWidthRestError: number | null;
  declare fwhmKms: number | null;
  declare fwhmKmsError: number | null;
  declare signalToNoise: number | null;
}

export class Verdict extends Model<InferAttributes<Verdict>, InferCreationAttributes<Verdict>> {
  declare id: string;
  declare spectrumId: string;
  declare measurementId: string | null;
  declare userId: string;
  declare kind: VerdictKind | 'withdrawn';
  declare redshift: number | null;
  declare redshiftError: number | null;
  declare candidatePlace: number | null;
  declare confidence: Confidence | null;
  declare flags: Flag[];
  declare comment: string;
  declare supersedes: string | null;
  /** The verdict that an undo brought back; this row repeats it. */
  declare restores: string | null;
  /** How long the person looked before giving it, seconds; null where it is not known. */
  declare lookSeconds: CreationOptional<number | null>;
  /** The engine's answer was hidden from the person until then; null where it was given before this was kept. */
  declare engineHidden: CreationOptional<boolean | null>;
  /** The person had been shown something of others' verdicts on it by then; null as above. */
  declare seenOthers: CreationOptional<boolean | null>;
  declare createdAt: CreationOptional<Date>;
}

export function defineAnswers(sequelize: Sequelize): void {
  const { STRING, TEXT, DATE, DOUBLE, TINYINT, BOOLEAN, UUID, JSON } = DataTypes;
  MeasurementRecord.init(
    {
      id: idColumn,
      spectrumId: UUID,
      engineVersion: STRING(40),
      settingsHash: STRING(64),
      instrumentId: UUID,
      lineList: STRING(40),
      redshift: DOUBLE,
      redshiftError: DOUBLE,
      redshiftErrorMeasured: DOUBLE,
      redshiftSystemic: DOUBLE,
      secondRedshift: DOUBLE,
      probability: DOUBLE,
      confidence: STRING(10),
      noiseFactor: DOUBLE,
      entropyBits: DOUBLE,
      objectClass: STRING(40),
      fluxUnit: STRING(80),
      flags: JSON,
      strongestLine: STRING(40),
      strongestLineSignalToNoise: DOUBLE,
      detail: JSON,
      createdAt: DATE(6),
    },
    { sequelize, tableName: 'measurements' },
  );
  CandidateRecord.init(
    {
      measurementId: { type: UUID, primaryKey: true },
      place: { type: TINYINT, primaryKey: true },
      redshift: DOUBLE,
      redshiftError: DOUBLE,
      probability: DOUBLE,
      objectClass: STRING(40),
    },
    { sequelize, tableName: 'candidates' },
  );
  LineFitRecord.init(
    {
      measurementId: { type: UUID, primaryKey: true },
      line: { type: STRING(40), primaryKey: true },
      component: { type: TINYINT, primaryKey: true },
      wavelengthRest: DOUBLE,
      wavelengthObserved: DOUBLE,
      flux: DOUBLE,
      fluxError: DOUBLE,
      equivalentWidthRest: DOUBLE,
      equivalentWidthRestError: DOUBLE,
      fwhmKms: DOUBLE,
      fwhmKmsError: DOUBLE,
      signalToNoise: DOUBLE,
    },
    { sequelize, tableName: 'line_fits' },
  );
  Verdict.init(
    {
      id: idColumn,
      spectrumId: UUID,
      measurementId: UUID,
      userId: UUID,
      kind: STRING(12),
      redshift: DOUBLE,
      redshiftError: DOUBLE,
      candidatePlace: TINYINT,
      confidence: STRING(10),
      flags: JSON,
      comment: TEXT,
      supersedes: UUID,
      restores: UUID,
      lookSeconds: DOUBLE,
      engineHidden: BOOLEAN,
      seenOthers: BOOLEAN,
      createdAt: DATE(6),
    },
    { sequelize, tableName: 'verdicts' },
  );
}
