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
  declare header: Record<string, string | number | boolean>;
  declare state: CreationOptional<'waiting' | 'measured' | 'failed'>;
  declare problem: CreationOptional<Problem | null>;
  /** The measurement that pages, queue and drafts show; null until there is one. */
  declare currentMeasurementId: CreationOptional<string | null>;
  declare tries: CreationOptional<number>;
}

export function defineObserving(sequelize: Sequelize): void {
  const { STRING, TEXT, DATE, DATEONLY, DOUBLE, BIGINT, INTEGER, TINYINT, UUID, CHAR, JSON } = DataTypes;
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
    { id: idColumn, programmeId: UUID, name: STRING(200), raDegrees: DOUBLE, decDegrees: DOUBLE, zone: INTEGER },
    { sequelize, tableName: 'targets' },
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
      header: JSON,
      state: STRING(10),
      problem: JSON,
      currentMeasurementId: UUID,
      tries: TINYINT,
    },
    { sequelize, tableName: 'spectra' },
  );
}
