import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';
import type { Confidence } from '$lib/domain/confidence';
import type { VerdictKind } from '$lib/domain/verdict';
import { idColumn } from './columns';

/** A third person's word on verdicts that differ. */
export class Ruling extends Model<InferAttributes<Ruling>, InferCreationAttributes<Ruling>> {
  declare id: string;
  declare spectrumId: string;
  declare userId: string;
  declare measurementId: string | null;
  /** The verdict it takes; null where it says something else. */
  declare verdictId: string | null;
  declare kind: VerdictKind | 'withdrawn';
  declare redshift: number | null;
  declare redshiftError: number | null;
  declare candidatePlace: number | null;
  declare confidence: Confidence | null;
  declare reason: string;
  declare supersedes: string | null;
  declare createdAt: CreationOptional<Date>;
}

/** A spectrum handed to a person; the newest of a spectrum holds, and one to nobody takes it back. */
export class Assignment extends Model<InferAttributes<Assignment>, InferCreationAttributes<Assignment>> {
  declare id: string;
  declare spectrumId: string;
  declare userId: string | null;
  declare assignedBy: string;
  declare note: string;
  declare createdAt: CreationOptional<Date>;
}

export class SpectrumComment extends Model<InferAttributes<SpectrumComment>, InferCreationAttributes<SpectrumComment>> {
  declare id: string;
  declare spectrumId: string;
  declare userId: string;
  declare text: string;
  /** Written when nobody's verdict could be told by it: shown before a reader's own verdict too. */
  declare shownToAll: boolean;
  declare createdAt: CreationOptional<Date>;
}

export function defineTogether(sequelize: Sequelize): void {
  const { STRING, TEXT, DATE, DOUBLE, TINYINT, BOOLEAN, UUID } = DataTypes;
  Ruling.init(
    {
      id: idColumn,
      spectrumId: UUID,
      userId: UUID,
      measurementId: UUID,
      verdictId: UUID,
      kind: STRING(12),
      redshift: DOUBLE,
      redshiftError: DOUBLE,
      candidatePlace: TINYINT,
      confidence: STRING(10),
      reason: TEXT,
      supersedes: UUID,
      createdAt: DATE(6),
    },
    { sequelize, tableName: 'rulings' },
  );
  Assignment.init(
    { id: idColumn, spectrumId: UUID, userId: UUID, assignedBy: UUID, note: TEXT, createdAt: DATE(6) },
    { sequelize, tableName: 'assignments' },
  );
  SpectrumComment.init(
    { id: idColumn, spectrumId: UUID, userId: UUID, text: TEXT, shownToAll: BOOLEAN, createdAt: DATE(6) },
    { sequelize, tableName: 'comments' },
  );
}
