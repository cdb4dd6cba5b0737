import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize';

/** An edit as it was handed in. No code updates a row of this table. `seq` is the order of folding. */
export class Edit extends Model<InferAttributes<Edit>, InferCreationAttributes<Edit>> {
  declare seq: number;
  declare id: string;
  declare run_id: string;
  declare digest: string;
  declare raw: string;
  declare author_kind: 'staff' | 'student';
  declare author_id: string;
  declare device_id: string;
  declare received_ms: number;
  declare receipt_code: string;
}

export const defineEdit = (sequelize: Sequelize) =>
  class extends Edit {}.init(
    {
      seq: { type: DataTypes.INTEGER, primaryKey: true },
      id: DataTypes.TEXT,
      run_id: DataTypes.TEXT,
      digest: DataTypes.TEXT,
      raw: DataTypes.TEXT,
      author_kind: DataTypes.TEXT,
      author_id: DataTypes.TEXT,
      device_id: DataTypes.TEXT,
      received_ms: DataTypes.INTEGER,
      receipt_code: DataTypes.TEXT,
    },
    { sequelize, tableName: 'edits' },
  );
