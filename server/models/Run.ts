import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize';

/** A run as it was handed in. No code updates a row of this table. */
export class Run extends Model<InferAttributes<Run>, InferCreationAttributes<Run>> {
  declare seq: number;
  declare id: string;
  declare digest: string;
  declare raw: string;
  declare owner_kind: 'staff' | 'student';
  declare owner_id: string;
  declare class_id: string | null;
  declare bench: number | null;
  declare device_id: string;
  declare received_ms: number;
  declare clock_skew_ms: number;
  declare receipt_code: string;
}

export const defineRun = (sequelize: Sequelize) =>
  class extends Run {}.init(
    {
      seq: { type: DataTypes.INTEGER, primaryKey: true },
      id: DataTypes.TEXT,
      digest: DataTypes.TEXT,
      raw: DataTypes.TEXT,
      owner_kind: DataTypes.TEXT,
      owner_id: DataTypes.TEXT,
      class_id: DataTypes.TEXT,
      bench: DataTypes.INTEGER,
      device_id: DataTypes.TEXT,
      received_ms: DataTypes.INTEGER,
      clock_skew_ms: DataTypes.INTEGER,
      receipt_code: DataTypes.TEXT,
    },
    { sequelize, tableName: 'runs' },
  );
