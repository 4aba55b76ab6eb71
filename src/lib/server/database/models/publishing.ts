import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';
import type { DraftSelection } from '$lib/domain/release';
import type { ReleaseSummary } from '$lib/domain/release-summary';
import { idColumn } from './columns';

export class Catalogue extends Model<InferAttributes<Catalogue>, InferCreationAttributes<Catalogue>> {
  declare id: string;
  declare programmeId: string;
  declare slug: string;
  declare title: string;
  declare abstract: string;
  declare createdBy: string;
  declare createdAt: CreationOptional<Date>;
}

export class Draft extends Model<InferAttributes<Draft>, InferCreationAttributes<Draft>> {
  declare id: string;
  declare catalogueId: string;
  declare selection: DraftSelection;
  declare notes: string;
  declare state: CreationOptional<'open' | 'frozen' | 'dropped'>;
  declare createdBy: string;
  declare createdAt: CreationOptional<Date>;
}

export class Release extends Model<InferAttributes<Release>, InferCreationAttributes<Release>> {
  declare id: string;
  declare catalogueId: string;
  declare number: number;
  declare draftId: string;
  declare draftedBy: string;
  declare frozenBy: string;
  declare notes: string;
  declare rowCount: number;
  declare contentSha256: string;
  declare engineVersion: string | null;
  declare summary: ReleaseSummary;
  declare frozenAt: Date;
}

export class OutboxEntry extends Model<InferAttributes<OutboxEntry>, InferCreationAttributes<OutboxEntry>> {
  declare id: CreationOptional<number>;
  declare jobName: string;
  declare jobId: string;
  declare payload: object;
  declare offeredAt: Date | null;
}

export function definePublishing(sequelize: Sequelize): void {
  const { STRING, TEXT, DATE, BIGINT, INTEGER, UUID, CHAR, JSON } = DataTypes;
  Catalogue.init(
    {
      id: idColumn,
      programmeId: UUID,
      slug: STRING(60),
      title: STRING(300),
      abstract: TEXT,
      createdBy: UUID,
      createdAt: DATE(6),
    },
    { sequelize, tableName: 'catalogues' },
  );
  Draft.init(
    {
      id: idColumn,
      catalogueId: UUID,
      selection: JSON,
      notes: TEXT,
      state: STRING(10),
      createdBy: UUID,
      createdAt: DATE(6),
    },
    { sequelize, tableName: 'drafts' },
  );
  Release.init(
    {
      id: idColumn,
      catalogueId: UUID,
      number: INTEGER,
      draftId: UUID,
      draftedBy: UUID,
      frozenBy: UUID,
      notes: TEXT,
      rowCount: INTEGER,
      contentSha256: CHAR(64),
      engineVersion: STRING(40),
      summary: JSON,
      frozenAt: DATE(6),
    },
    { sequelize, tableName: 'releases' },
  );
  OutboxEntry.init(
    {
      id: { type: BIGINT, primaryKey: true, autoIncrement: true },
      jobName: STRING(40),
      jobId: STRING(120),
      payload: JSON,
      offeredAt: DATE(6),
    },
    { sequelize, tableName: 'outbox' },
  );
}
