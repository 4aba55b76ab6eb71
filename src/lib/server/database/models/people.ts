import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';
import { idColumn } from './columns';

export class User extends Model<InferAttributes<User>, InferCreationAttributes<User>> {
  declare id: string;
  declare email: string;
  declare name: string;
  declare passwordHash: string | null;
  declare isAdmin: CreationOptional<boolean>;
  declare isDemo: CreationOptional<boolean>;
  declare createdAt: CreationOptional<Date>;
}

export class Session extends Model<InferAttributes<Session>, InferCreationAttributes<Session>> {
  declare id: string;
  declare userId: string;
  declare startedAt: CreationOptional<Date>;
  declare expiresAt: Date;
}

export class ApiToken extends Model<InferAttributes<ApiToken>, InferCreationAttributes<ApiToken>> {
  declare id: string;
  declare userId: string;
  declare tokenHash: string;
  declare scope: string;
  declare name: CreationOptional<string>;
  declare createdAt: CreationOptional<Date>;
  declare expiresAt: Date | null;
}

export class Programme extends Model<InferAttributes<Programme>, InferCreationAttributes<Programme>> {
  declare id: string;
  declare slug: string;
  declare name: string;
  declare looks: CreationOptional<number>;
  declare isDemo: CreationOptional<boolean>;
}

export class ProgrammeMember extends Model<InferAttributes<ProgrammeMember>, InferCreationAttributes<ProgrammeMember>> {
  declare programmeId: string;
  declare userId: string;
  declare role: string;
}

export class Invitation extends Model<InferAttributes<Invitation>, InferCreationAttributes<Invitation>> {
  declare id: string;
  declare tokenHash: string;
  declare makesAdmin: boolean;
  /** Whom it invites, to which programme, as what, and who did; null for the first administrator's. */
  declare email: CreationOptional<string | null>;
  declare programmeId: CreationOptional<string | null>;
  declare roles: CreationOptional<string[] | null>;
  declare invitedBy: CreationOptional<string | null>;
  declare createdAt: CreationOptional<Date>;
  declare expiresAt: Date;
  declare usedAt: Date | null;
  declare withdrawnAt: CreationOptional<Date | null>;
}

export function definePeople(sequelize: Sequelize): void {
  const { STRING, BOOLEAN, DATE, TINYINT, UUID, CHAR, JSON } = DataTypes;
  User.init(
    {
      id: idColumn,
      email: STRING(254),
      name: STRING(200),
      passwordHash: STRING(255),
      isAdmin: BOOLEAN,
      isDemo: BOOLEAN,
      createdAt: DATE(6),
    },
    { sequelize, tableName: 'users' },
  );
  Session.init(
    { id: { type: CHAR(64), primaryKey: true }, userId: UUID, startedAt: DATE(6), expiresAt: DATE(6) },
    { sequelize, tableName: 'sessions' },
  );
  ApiToken.init(
    {
      id: idColumn,
      userId: UUID,
      tokenHash: CHAR(64),
      scope: STRING(100),
      name: STRING(100),
      createdAt: DATE(6),
      expiresAt: DATE(6),
    },
    { sequelize, tableName: 'api_tokens' },
  );
  Programme.init(
    { id: idColumn, slug: STRING(60), name: STRING(200), looks: TINYINT, isDemo: BOOLEAN },
    { sequelize, tableName: 'programmes' },
  );
  ProgrammeMember.init(
    {
      programmeId: { type: UUID, primaryKey: true },
      userId: { type: UUID, primaryKey: true },
      role: { type: STRING(20), primaryKey: true },
    },
    { sequelize, tableName: 'programme_members' },
  );
  Invitation.init(
    {
      id: idColumn,
      tokenHash: CHAR(64),
      makesAdmin: BOOLEAN,
      email: STRING(254),
      programmeId: UUID,
      roles: JSON,
      invitedBy: UUID,
      createdAt: DATE(6),
      expiresAt: DATE(6),
      usedAt: DATE(6),
      withdrawnAt: DATE(6),
    },
    { sequelize, tableName: 'invitations' },
  );
}
