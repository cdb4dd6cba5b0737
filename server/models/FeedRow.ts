import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize';

/** The server's own order of everything that happened to runs, and who may hear of it. */
export class FeedRow extends Model<InferAttributes<FeedRow>, InferCreationAttributes<FeedRow>> {
  declare seq: number;
  declare kind: 'run' | 'edit' | 'analysis';
  /** `seq` of the row in runs, edits or analyses. */
  declare ref_seq: number;
  /** Size of that row's text, to keep one answer within bounds. */
  declare bytes: number;
  declare class_id: string | null;
  declare bench: number | null;
  declare owner_id: string;
}

export const defineFeedRow = (sequelize: Sequelize) =>
  class extends FeedRow {}.init(
    {
      seq: { type: DataTypes.INTEGER, primaryKey: true },
      kind: DataTypes.TEXT,
      ref_seq: DataTypes.INTEGER,
      bytes: DataTypes.INTEGER,
      class_id: DataTypes.TEXT,
      bench: DataTypes.INTEGER,
      owner_id: DataTypes.TEXT,
    },
    { sequelize, tableName: 'feed' },
  );
