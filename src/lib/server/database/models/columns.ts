import { DataTypes } from 'sequelize';
import { newIdentifier } from '../identifier';

/** Primary key: UUID version 7 in MariaDB's 16-byte UUID type, text on our side. */
export const idColumn = { type: DataTypes.UUID, primaryKey: true, defaultValue: () => newIdentifier() };
