import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';
import type { Instrument as InstrumentDescription } from '$lib/domain/instrument';
import type { Problem } from '$lib/domain/problem';
import { idColumn } from './columns';

export class InstrumentVersion extends Model<
  InferAttributes<InstrumentVersion>,
  InferCreationAttributes<InstrumentVersion>
> {
  declare id: string;
  declare programmeId: string;
  declare name: string;
  declare version: number;
  declare description: InstrumentDescription;
  /** What changed, in the words of whoever saved it. */
  declare note: CreationOptional<string>;
  declare createdBy: CreationOptional<string | null>;
  declare createdAt: CreationOptional<Date>;
}

export class Night extends Model<InferAttributes<Night>, InferCreationAttributes<Night>> {
  declare id: string;
  declare programmeId: string;
  declare instrumentId: string | null;
  declare civilDate: string;
  declare notes: string;
  declare revision: CreationOptional<number>;
  declare createdBy: string;
  declare createdAt: CreationOptional<Date>;
}

export class SpectrumFile extends Model<InferAttributes<SpectrumFile>, InferCreationAttributes<SpectrumFile>> {
  declare id: string;
  declare programmeId: string;
  declare sha256: string;
  declare sizeBytes: number;
  declare originalName: string;
  declare instrumentId: string | null;
  declare state: CreationOptional<'waiting' | 'read' | 'failed' | 'needs assignment'>;
  declare problems: Problem[];
  declare tries: CreationOptional<number>;
  /** Of a file that needs an assignment: SHA-256 of the names of its columns. */
  declare shape: CreationOptional<string | null>;
}

export class NightFile extends Model<InferAttributes<NightFile>, InferCreationAttributes<NightFile>> {
  declare nightId: string;
  declare fileId: string;
  declare name: string;
}

export class Target extends Model<InferAttributes<Target>, InferCreationAttributes<Target>> {
  declare id: string;
  declare programmeId: string;
  declare name: string;
  declare raDegrees: number | null;
  declare decDegrees: number | null;
  declare zone: number | null;
  /** The larger the more urgent; from a target list. */
  declare priority: CreationOptional<number | null>;
  declare isListed: CreationOptional<boolean>;
}

/** One name of a target; two places may share one. */
export class TargetName extends Model<InferAttributes<TargetName>, InferCreationAttributes<TargetName>> {
  declare targetId: string;
  declare folded: string;
  declare programmeId: string;
  declare name: string;
}

export class SpectrumRecord extends Model<InferAttributes<SpectrumRecord>, InferCreationAttributes<SpectrumRecord>> {
  declare id: string;
  declare fileId: string;
  declare targetId: string | null;
  declare extension: number;
  declare rowIndex: number;
  declare name: string | null;
  declare raDegrees: number | null;
  declare decDegrees: number | null;
  declare exposureSeconds: number | null;
  declare pixelCount: number;
  declare wavelengthMin: number;
  declare wavelengthMax: number;
  declare medianSignalToNoise: number | null;
  declare midExposure: CreationOptional<Date | null>;
  declare skyOffsetKms: CreationOptional<number | null>;
  declare skyScatterKms: CreationOptional<number | null>;
  declare kind: CreationOptional<'exposure' | 'stack' | 'combination'>;
  declare exposureStart: CreationOptional<Date | null>;
  declare exposureEnd: CreationOptional<Date | null>;
  /** Same for reductions of one exposure. */
  declare exposureKey: CreationOptional<string | null>;
  /** The newer reduction of the same exposure. */
  declare supersededBy: CreationOptional<string | null>;
  declare positionDoubt: CreationOptional<Problem | null>;
  declare header: Record<string, string | number | boolean>;
  declare state: CreationOptional<'waiting' | 'measured' | 'failed'>;
  declare problem: CreationOptional<Problem | null>;
  /** The measurement that pages, queue and drafts show; null until there is one. */
  declare currentMeasurementId: CreationOptional<string | null>;
  declare tries: CreationOptional<number>;
}

export function defineObserving(sequelize: Sequelize): void {
  const { STRING, TEXT, BOOLEAN, DATE, DATEONLY, DOUBLE, BIGINT, INTEGER, TINYINT, UUID, CHAR, JSON } = DataTypes;
  InstrumentVersion.init(
    {
      id: idColumn,
      programmeId: UUID,
      name: STRING(200),
      version: INTEGER,
      description: JSON,
      note: STRING(500),
      createdBy: UUID,
      createdAt: DATE(6),
    },
    { sequelize, tableName: 'instruments' },
  );
  Night.init(
    {
      id: idColumn,
      programmeId: UUID,
      instrumentId: UUID,
      civilDate: DATEONLY,
      notes: TEXT,
      revision: BIGINT,
      createdBy: UUID,
      createdAt: DATE(6),
    },
    { sequelize, tableName: 'nights' },
  );
  SpectrumFile.init(
    {
      id: idColumn,
      programmeId: UUID,
      sha256: CHAR(64),
      sizeBytes: BIGINT,
      originalName: STRING(255),
      instrumentId: UUID,
      state: STRING(10),
      problems: JSON,
      tries: TINYINT,
      shape: CHAR(64),
    },
    { sequelize, tableName: 'files' },
  );
  NightFile.init(
    { nightId: { type: UUID, primaryKey: true }, fileId: { type: UUID, primaryKey: true }, name: STRING(255) },
    { sequelize, tableName: 'night_files' },
  );
  Target.init(
    {
      id: idColumn,
      programmeId: UUID,
      name: STRING(200),
      raDegrees: DOUBLE,
      decDegrees: DOUBLE,
      zone: INTEGER,
      priority: DOUBLE,
      isListed: BOOLEAN,
    },
    { sequelize, tableName: 'targets' },
  );
  TargetName.init(
    {
      targetId: { type: UUID, primaryKey: true },
      folded: { type: STRING(200), primaryKey: true },
      programmeId: UUID,
      name: STRING(200),
    },
    { sequelize, tableName: 'target_names' },
  );
  SpectrumRecord.init(
    {
      id: idColumn,
      fileId: UUID,
      targetId: UUID,
      extension: INTEGER,
      rowIndex: INTEGER,
      name: STRING(200),
      raDegrees: DOUBLE,
      decDegrees: DOUBLE,
      exposureSeconds: DOUBLE,
      pixelCount: INTEGER,
      wavelengthMin: DOUBLE,
      wavelengthMax: DOUBLE,
      medianSignalToNoise: DOUBLE,
      midExposure: DATE(6),
      skyOffsetKms: DOUBLE,
      skyScatterKms: DOUBLE,
      kind: STRING(12),
      exposureStart: DATE(6),
      exposureEnd: DATE(6),
      exposureKey: CHAR(64),
      supersededBy: UUID,
      positionDoubt: JSON,
      header: JSON,
      state: STRING(10),
      problem: JSON,
      currentMeasurementId: UUID,
      tries: TINYINT,
    },
    { sequelize, tableName: 'spectra' },
  );
}
