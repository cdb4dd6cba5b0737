import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';

/** What was done, or tried, that somebody may have to answer for. No names and no content, only ids. */
export class ActivityEntry extends Model<InferAttributes<ActivityEntry>, InferCreationAttributes<ActivityEntry>> {
  declare id: CreationOptional<number>;
  declare at_ms: number;
  declare actor_kind: string;
  declare actor_id: string | null;
  declare action: string;
  declare subject: string;
}

export const defineActivityEntry = (sequelize: Sequelize) =>
  class extends ActivityEntry {}.init(
    {
      id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
      at_ms: DataTypes.INTEGER,
      actor_kind: DataTypes.TEXT,
      actor_id: DataTypes.TEXT,
      action: DataTypes.TEXT,
      subject: DataTypes.TEXT,
    },
    { sequelize, tableName: 'activity_log' },
  );
