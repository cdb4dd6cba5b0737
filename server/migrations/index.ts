import { SequelizeStorage, Umzug } from 'umzug';
import type { QueryInterface, Sequelize } from 'sequelize';
import { firstTables } from './0001-first-tables';
import { boardFigures } from './0002-board-figures';

export interface Migration {
  name: string;
  up(queries: QueryInterface): Promise<void>;
}

/** In order, for ever: a migration that has been released is never changed. Listed here so that the built server holds them. */
const MIGRATIONS: Migration[] = [firstTables, boardFigures];

/** Runs what has not run yet. Tables only ever gain; there is no way down but a backup. */
export async function migrate(sequelize: Sequelize): Promise<void> {
  const umzug = new Umzug<QueryInterface>({
    migrations: MIGRATIONS.map(({ name, up }) => ({ name, up: ({ context }) => up(context) })),
    context: sequelize.getQueryInterface(),
    storage: new SequelizeStorage({ sequelize, tableName: 'migrations' }),
    logger: undefined,
  });
  await umzug.up();
}
