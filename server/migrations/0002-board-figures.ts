import type { Migration } from './index';

const STATEMENTS = [
  'ALTER TABLE current_analyses ADD COLUMN small_period_expanded_u_s REAL',
  'ALTER TABLE current_analyses ADD COLUMN set_aside INTEGER NOT NULL DEFAULT 0',
  // What is held already was stated with it, and boards ask for it from now on.
  `UPDATE current_analyses SET small_period_expanded_u_s =
     (SELECT json_extract(body, '$.small_period_s.expanded_u') FROM analyses WHERE seq = analysis_seq)`,
];

/** The Board shows U as the Desk does, and no run that is set aside. */
export const boardFigures: Migration = {
  name: '0002-board-figures',
  async up(queries) {
    for (const statement of STATEMENTS) await queries.sequelize.query(statement);
  },
};
