import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize';

/** An analysis of record. Rows are only added; `current_analyses` says which one is in force. */
export class StoredAnalysis extends Model<InferAttributes<StoredAnalysis>, InferCreationAttributes<StoredAnalysis>> {
  declare seq: number;
  declare run_id: string;
  declare input_digest: string;
  declare method: string;
  /** JSON text of an Analysis. */
  declare body: string;
  declare computed_ms: number;
}

export const defineStoredAnalysis = (sequelize: Sequelize) =>
  class extends StoredAnalysis {}.init(
    {
      seq: { type: DataTypes.INTEGER, primaryKey: true },
      run_id: DataTypes.TEXT,
      input_digest: DataTypes.TEXT,
      method: DataTypes.TEXT,
      body: DataTypes.TEXT,
      computed_ms: DataTypes.INTEGER,
    },
    { sequelize, tableName: 'analyses' },
  );
