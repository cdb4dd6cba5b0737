import { join } from 'node:path';
import { QueryTypes, Sequelize, Transaction, type BindOrReplacements } from 'sequelize';
import sqlite3 from 'sqlite3';
import { migrate } from '../migrations/index';
import { defineModels, type Models } from './defineModels';
import { keepWriterOpen } from './keepWriterOpen';
import { createMutex } from './mutex';

export interface Database {
  sequelize: Sequelize;
  models: Models;
  /**
   * The one way to write. Writers stand in line here and hold the write lock from the start, so
   * none fails for a stale snapshot and two checkpoints never meet. Every query inside must be given
   * the transaction: one without it waits for the lock its own caller holds.
   */
  writeTransaction<T>(write: (transaction: Transaction) => Promise<T>): Promise<T>;
  select<Row extends object>(sql: string, bind: BindOrReplacements, transaction?: Transaction): Promise<Row[]>;
  run(sql: string, bind: BindOrReplacements, transaction: Transaction): Promise<void>;
  close(): Promise<void>;
}

export const DATABASE_FILE = 'swaymark.sqlite3';

/**
 * Opens DATA_DIR/swaymark.sqlite3 and brings its tables up to date. Readers share one connection, the
 * writer has another, both with SQLite's defaults of synchronous FULL and foreign keys on; a receipt
 * promises durability, so nothing here may lower them.
 */
export async function openDatabase(dataDir: string): Promise<Database> {
  const sequelize = new Sequelize({
    dialect: 'sqlite',
    dialectModule: sqlite3,
    storage: join(dataDir, DATABASE_FILE),
    logging: false,
    // A retry repeats the statement, not the transaction, and only hides a missing `transaction`.
    retry: { max: 1 },
    define: { timestamps: false, freezeTableName: true },
  });
  const dropWriter = keepWriterOpen(sequelize);
  await sequelize.query('PRAGMA journal_mode = WAL');
  await migrate(sequelize);
  const models = defineModels(sequelize);
  const oneAtATime = createMutex();
  return {
    sequelize,
    models,
    writeTransaction: (write) =>
      oneAtATime(async () => {
        try {
          return await sequelize.transaction({ type: Transaction.TYPES.IMMEDIATE }, write);
        } catch (error) {
          await dropWriter();
          throw error;
        }
      }),
    select: (sql, bind, transaction) => sequelize.query(sql, { type: QueryTypes.SELECT, bind, transaction }),
    run: async (sql, bind, transaction) => {
      await sequelize.query(sql, { type: QueryTypes.RAW, bind, transaction });
    },
    close: () => oneAtATime(() => sequelize.close()),
  };
}
