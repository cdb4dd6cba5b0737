import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize';
import { withoutInvisibleSigns } from '@shared/schemas/invisibleSigns';

export class Student extends Model<InferAttributes<Student>, InferCreationAttributes<Student>> {
  declare id: string;
  declare class_id: string;
  declare bench: number;
  declare nickname: string;
  /** What makes two nicknames of a bench the same: see nicknameKey. */
  declare nickname_key: string;
  declare pin_hash: string;
  /** What the phone called its joining, so that a join whose answer was lost can be asked for again. */
  declare join_id: string;
  declare created_ms: number;
}

/** "Ana", "ana" and "ANA " are one nickname, and so are two that differ in what cannot be seen. */
export function nicknameKey(nickname: string): string {
  return withoutInvisibleSigns(nickname.normalize('NFKC')).trim().toLowerCase().replace(/\s+/g, ' ');
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
      join_id: DataTypes.TEXT,
      created_ms: DataTypes.INTEGER,
    },
    { sequelize, tableName: 'students' },
  );
