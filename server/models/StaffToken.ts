import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';
import type { StaffRole } from '@shared/schemas/accounts';

/** A link that lets somebody in once. Only its hash is here, so a copy of the database opens nothing. */
export class StaffToken extends Model<InferAttributes<StaffToken>, InferCreationAttributes<StaffToken>> {
  declare id: string;
  declare purpose: 'set_up' | 'invite' | 'reset';
  declare token_hash: string;
  declare email: CreationOptional<string | null>;
  declare role: CreationOptional<StaffRole | null>;
  declare account_id: CreationOptional<string | null>;
  declare invited_by: CreationOptional<string | null>;
  declare created_ms: number;
  declare expires_ms: number;
  declare used_ms: CreationOptional<number | null>;
}

export const defineStaffToken = (sequelize: Sequelize) =>
  class extends StaffToken {}.init(
    {
      id: { type: DataTypes.TEXT, primaryKey: true },
      purpose: DataTypes.TEXT,
      token_hash: DataTypes.TEXT,
      email: DataTypes.TEXT,
      role: DataTypes.TEXT,
      account_id: DataTypes.TEXT,
      invited_by: DataTypes.TEXT,
      created_ms: DataTypes.INTEGER,
      expires_ms: DataTypes.INTEGER,
      used_ms: DataTypes.INTEGER,
    },
    { sequelize, tableName: 'staff_tokens' },
  );
