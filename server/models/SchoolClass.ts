import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize';

export class SchoolClass extends Model<InferAttributes<SchoolClass>, InferCreationAttributes<SchoolClass>> {
  declare id: string;
  /** The staff account whose class it is. */
  declare owner_id: string;
  declare name: string;
  declare teacher_word: string;
  declare code: string;
  declare board_pass: string;
  declare created_ms: number;
}

export const defineSchoolClass = (sequelize: Sequelize) =>
  class extends SchoolClass {}.init(
    {
      id: { type: DataTypes.TEXT, primaryKey: true },
      owner_id: DataTypes.TEXT,
      name: DataTypes.TEXT,
      teacher_word: DataTypes.TEXT,
      code: DataTypes.TEXT,
      board_pass: DataTypes.TEXT,
      created_ms: DataTypes.INTEGER,
    },
    { sequelize, tableName: 'classes' },
  );
