import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Sequelize,
} from 'sequelize';

/**
 * One signed-in device. The session only points here, and every request reads this row: once
 * `revoked_ms` is set nothing a late request does can bring the sign-in back.
 */
export class SignIn extends Model<InferAttributes<SignIn>, InferCreationAttributes<SignIn>> {
  declare id: string;
  declare actor_kind: 'staff' | 'student';
  declare actor_id: string;
  declare created_ms: number;
  declare last_seen_ms: number;
  declare revoked_ms: CreationOptional<number | null>;
}

export const defineSignIn = (sequelize: Sequelize) =>
  class extends SignIn {}.init(
    {
      id: { type: DataTypes.TEXT, primaryKey: true },
      actor_kind: DataTypes.TEXT,
      actor_id: DataTypes.TEXT,
      created_ms: DataTypes.INTEGER,
      last_seen_ms: DataTypes.INTEGER,
      revoked_ms: DataTypes.INTEGER,
    },
    { sequelize, tableName: 'sign_ins' },
  );
