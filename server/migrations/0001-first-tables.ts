import type { Migration } from './index';

/**
 * People, classes, runs, edits, analyses and the feed. Times are whole milliseconds of the server's
 * clock. `raw` is the canonical text as it came: no figure of a recording is stored in any other way.
 * `seq` of a run or an edit is its place in the feed, the one order the server knows.
 */
const TABLES = [
  `CREATE TABLE server_meta (key TEXT PRIMARY KEY, content TEXT NOT NULL) WITHOUT ROWID`,
  `CREATE TABLE staff_accounts (
    id TEXT PRIMARY KEY,
    name TEXT NOT NULL,
    email TEXT NOT NULL UNIQUE,
    role TEXT NOT NULL CHECK (role IN ('volunteer', 'teacher', 'coordinator')),
    password_hash TEXT NOT NULL,
    created_ms INTEGER NOT NULL,
    disabled_ms INTEGER)`,
  `CREATE TABLE staff_tokens (
    id TEXT PRIMARY KEY,
    purpose TEXT NOT NULL CHECK (purpose IN ('set_up', 'invite', 'reset')),
    token_hash TEXT NOT NULL UNIQUE,
    email TEXT,
    role TEXT CHECK (role IN ('volunteer', 'teacher', 'coordinator')),
    account_id TEXT REFERENCES staff_accounts (id),
    invited_by TEXT REFERENCES staff_accounts (id),
    created_ms INTEGER NOT NULL,
    expires_ms INTEGER NOT NULL,
    used_ms INTEGER)`,
  `CREATE TABLE classes (
    id TEXT PRIMARY KEY,
    owner_id TEXT NOT NULL REFERENCES staff_accounts (id),
    name TEXT NOT NULL,
    teacher_word TEXT NOT NULL,
    code TEXT NOT NULL UNIQUE,
    board_pass TEXT NOT NULL UNIQUE,
    created_ms INTEGER NOT NULL)`,
  `CREATE INDEX classes_owner ON classes (owner_id)`,
  `CREATE TABLE students (
    id TEXT PRIMARY KEY,
    class_id TEXT NOT NULL REFERENCES classes (id),
    bench INTEGER NOT NULL CHECK (typeof(bench) = 'integer'),
    nickname TEXT NOT NULL,
    nickname_key TEXT NOT NULL,
    pin_hash TEXT NOT NULL,
    join_id TEXT NOT NULL UNIQUE,
    created_ms INTEGER NOT NULL,
    UNIQUE (class_id, bench, nickname_key))`,
  `CREATE TABLE sign_ins (
    id TEXT PRIMARY KEY,
    actor_kind TEXT NOT NULL CHECK (actor_kind IN ('staff', 'student')),
    actor_id TEXT NOT NULL,
    created_ms INTEGER NOT NULL,
    last_seen_ms INTEGER NOT NULL,
    revoked_ms INTEGER)`,
  `CREATE INDEX sign_ins_actor ON sign_ins (actor_id)`,
  `CREATE TABLE runs (
    seq INTEGER PRIMARY KEY,
    id TEXT NOT NULL UNIQUE,
    digest TEXT NOT NULL,
    raw TEXT NOT NULL,
    owner_kind TEXT NOT NULL CHECK (owner_kind IN ('staff', 'student')),
    owner_id TEXT NOT NULL,
    class_id TEXT REFERENCES classes (id),
    bench INTEGER CHECK (bench IS NULL OR typeof(bench) = 'integer'),
    device_id TEXT NOT NULL,
    received_ms INTEGER NOT NULL CHECK (typeof(received_ms) = 'integer'),
    clock_skew_ms INTEGER NOT NULL CHECK (typeof(clock_skew_ms) = 'integer'),
    receipt_code TEXT NOT NULL)`,
  `CREATE INDEX runs_owner ON runs (owner_id, received_ms)`,
  `CREATE INDEX runs_class ON runs (class_id)`,
  `CREATE TABLE run_deliveries (
    run_id TEXT NOT NULL REFERENCES runs (id),
    by_id TEXT NOT NULL,
    device_id TEXT NOT NULL,
    received_ms INTEGER NOT NULL,
    PRIMARY KEY (run_id, by_id)) WITHOUT ROWID`,
  `CREATE TABLE edits (
    seq INTEGER PRIMARY KEY,
    id TEXT NOT NULL UNIQUE,
    run_id TEXT NOT NULL REFERENCES runs (id),
    digest TEXT NOT NULL,
    raw TEXT NOT NULL,
    author_kind TEXT NOT NULL CHECK (author_kind IN ('staff', 'student')),
    author_id TEXT NOT NULL,
    device_id TEXT NOT NULL,
    received_ms INTEGER NOT NULL CHECK (typeof(received_ms) = 'integer'),
    receipt_code TEXT NOT NULL)`,
  `CREATE INDEX edits_run ON edits (run_id, seq)`,
  `CREATE INDEX edits_author ON edits (author_id, received_ms)`,
  `CREATE TABLE analyses (
    seq INTEGER PRIMARY KEY,
    run_id TEXT NOT NULL REFERENCES runs (id),
    input_digest TEXT NOT NULL,
    method TEXT NOT NULL,
    body TEXT NOT NULL,
    computed_ms INTEGER NOT NULL,
    UNIQUE (run_id, input_digest))`,
  // Which analysis is in force, and what the Board shows of it. Everything here can be computed again.
  `CREATE TABLE current_analyses (
    run_id TEXT PRIMARY KEY REFERENCES runs (id),
    analysis_seq INTEGER NOT NULL REFERENCES analyses (seq),
    feed_seq INTEGER NOT NULL,
    edit_seq INTEGER NOT NULL,
    class_id TEXT,
    bench INTEGER,
    small_period_s REAL,
    small_period_u_s REAL,
    length_m REAL,
    open_flags INTEGER NOT NULL) WITHOUT ROWID`,
  `CREATE INDEX current_analyses_class ON current_analyses (class_id, feed_seq)`,
  `CREATE TABLE feed (
    seq INTEGER PRIMARY KEY AUTOINCREMENT,
    kind TEXT NOT NULL CHECK (kind IN ('run', 'edit', 'analysis')),
    ref_seq INTEGER NOT NULL,
    bytes INTEGER NOT NULL,
    class_id TEXT,
    bench INTEGER,
    owner_id TEXT NOT NULL)`,
  `CREATE INDEX feed_bench ON feed (class_id, bench, seq)`,
  `CREATE INDEX feed_owner ON feed (owner_id, seq)`,
  `CREATE TABLE activity_log (
    id INTEGER PRIMARY KEY AUTOINCREMENT,
    at_ms INTEGER NOT NULL,
    actor_kind TEXT NOT NULL,
    actor_id TEXT,
    action TEXT NOT NULL,
    subject TEXT NOT NULL)`,
];

export const firstTables: Migration = {
  name: '0001-first-tables',
  async up(queries) {
    for (const sql of TABLES) await queries.sequelize.query(sql);
  },
};
