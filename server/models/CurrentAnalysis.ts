import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize';

/** Which analysis of a run is in force, and what the Board shows of it. */
export class CurrentAnalysis extends Model<InferAttributes<CurrentAnalysis>, InferCreationAttributes<CurrentAnalysis>> {
  declare run_id: string;
  declare analysis_seq: number;
  /** Place in the feed where this analysis came into force. */
  declare feed_seq: number;
  /** The last edit it takes into account; 0 for none. */
  declare edit_seq: number;
  declare class_id: string | null;
  declare bench: number | null;
  declare small_period_s: number | null;
  declare small_period_u_s: number | null;
  declare small_period_expanded_u_s: number | null;
  declare length_m: number | null;
  declare open_flags: number;
  declare set_aside: boolean;
}

export const defineCurrentAnalysis = (sequelize: Sequelize) =>
  class extends CurrentAnalysis {}.init(
    {
      run_id: { type: DataTypes.TEXT, primaryKey: true },
      analysis_seq: DataTypes.INTEGER,
      feed_seq: DataTypes.INTEGER,
      edit_seq: DataTypes.INTEGER,
      class_id: DataTypes.TEXT,
      bench: DataTypes.INTEGER,
      small_period_s: DataTypes.REAL,
      small_period_u_s: DataTypes.REAL,
      small_period_expanded_u_s: DataTypes.REAL,
      length_m: DataTypes.REAL,
      open_flags: DataTypes.INTEGER,
      set_aside: DataTypes.BOOLEAN,
    },
    { sequelize, tableName: 'current_analyses' },
  );
