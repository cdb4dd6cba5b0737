import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';
import type { StaffRole } from '@shared/schemas/accounts';

export class StaffAccount extends Model<InferAttributes<StaffAccount>, InferCreationAttributes<StaffAccount>> {
  declare id: string;
  declare name: string;
  /** Trimmed and in lower case. */
  declare email: string;
  declare role: StaffRole;
  declare password_hash: string;
  declare created_ms: number;
  declare disabled_ms: CreationOptional<number | null>;
}

export const defineStaffAccount = (sequelize: Sequelize) =>
  class extends StaffAccount {}.init(
    {
      id: { type: DataTypes.TEXT, primaryKey: true },
      name: DataTypes.TEXT,
      email: DataTypes.TEXT,
      role: DataTypes.TEXT,
      password_hash: DataTypes.TEXT,
      created_ms: DataTypes.INTEGER,
      disabled_ms: DataTypes.INTEGER,
    },
    { sequelize, tableName: 'staff_accounts' },
  );
