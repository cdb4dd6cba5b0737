import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize';

export class Student extends Model<InferAttributes<Student>, InferCreationAttributes<Student>> {
  declare id: string;
  declare class_id: string;
  declare bench: number;
  declare nickname: string;
  /** What makes two nicknames of a bench the same: see nicknameKey. */
  declare nickname_key: string;
  declare pin_hash: string;
  declare created_ms: number;
}

/** "Ana", "ana" and "ANA " are one nickname. */
export function nicknameKey(nickname: string): string {
  return nickname.normalize('NFKC').trim().toLowerCase().replace(/\s+/g, ' ');
}

export const defineStudent = (sequelize: Sequelize) =>
  class extends Student {}.init(
    {
      id: { type: DataTypes.TEXT, primaryKey: true },
      class_id: DataTypes.TEXT,
      bench: DataTypes.INTEGER,
      nickname: DataTypes.TEXT,
      nickname_key: DataTypes.TEXT,
      pin_hash: DataTypes.TEXT,
      created_ms: DataTypes.INTEGER,
    },
    { sequelize, tableName: 'students' },
  );
