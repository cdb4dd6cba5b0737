/**
 * Shows that the schedules catch bugs of the kinds they are for: plants each one in a temporary copy of the
 * tree, runs the schedules there, and prints what it took. Ends with 1 when one is not caught.
 */
import { execFileSync, spawnSync } from 'node:child_process';
import { cpSync, mkdirSync, mkdtempSync, readFileSync, rmSync, symlinkSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join, resolve } from 'node:path';

const root = resolve(import.meta.dirname, '../..');
const MOST_SCHEDULES = process.env.SCHEDULES ?? '1000';

/** Each change names the text it replaces, which must be there exactly once. */
const BUGS = [
  {
    name: 'receipt before commit',
    file: 'server/services/intake/handIn.ts',
    changes: [
      [
        'await deps.database.writeTransaction(async (transaction) => {',
        'await new Promise<void>((early, fail) => { deps.database.writeTransaction(async (transaction) => {',
      ],
      [
        '    await storeEdits(deps, delivery, edits, verdicts, transaction);\n  });',
        '    await storeEdits(deps, delivery, edits, verdicts, transaction);\n    early();\n  }).catch(fail); });',
      ],
    ],
  },
  {
    name: 'upsert by id',
    file: 'server/services/intake/storeRuns.ts',
    changes: [
      ['for (const row of await heldRuns(deps, items, transaction)) held.set(row.id, row);', ''],
      [
        "await insertRows(database, 'runs', fresh, transaction);",
        "await insertRows(database, 'runs', fresh, transaction, { onConflict: 'ON CONFLICT (id) DO UPDATE SET digest = excluded.digest, raw = excluded.raw, owner_id = excluded.owner_id' as '' });",
      ],
    ],
  },
  {
    name: 'no owner check',
    file: 'server/services/intake/storeRuns.ts',
    changes: [['if (!reaches) return NOT_YOURS;', '']],
  },
  {
    name: 'marked as sent before the answer',
    file: 'src/sync/round.ts',
    changes: [
      [
        '  const answer = await parts.api.sendBatch({',
        `  const receipt = { code: 'K7QM', received_wall_ms: parts.wallNow(), server_seq: 1 };
  await applyVerdicts(parts.store, items.map(({ type, id, digest }) => ({ verdict: 'stored', type, id, digest, receipt })));
  const answer = await parts.api.sendBatch({`,
      ],
    ],
  },
  {
    name: 'durable sending flag',
    file: 'src/sync/round.ts',
    changes: [
      [
        '  const answer = await parts.api.sendBatch({',
        `  const flag = (state: string) =>
    parts.store.runs.where('id').anyOf(items.map(({ id }) => id)).modify({ state: state as 'waiting' });
  await flag('sending');
  const answer = await parts.api.sendBatch({`,
      ],
      [
        '    items,\n  });',
        "    items,\n  }).catch(async (cause: unknown) => {\n    await flag('waiting');\n    throw cause;\n  });",
      ],
    ],
  },
];

const asked = process.argv.slice(2);
let missed = 0;
for (const bug of BUGS.filter(({ name }) => asked.length === 0 || asked.some((word) => name.includes(word)))) {
  const result = inCopy(bug);
  if (!result) missed += 1;
  const line = result
    ? `caught after ${result.schedules} schedules, seed ${result.seed}: ${result.seen}`
    : 'NOT CAUGHT';
  process.stdout.write(`${bug.name.padEnd(34)}${line}\n`);
}
process.exit(missed > 0 ? 1 : 0);

function inCopy({ file, changes }) {
  const copy = mkdtempSync(join(tmpdir(), 'swaymark-planted-'));
  try {
    const files = execFileSync('git', ['ls-files', '-z', '--cached', '--others', '--exclude-standard'], { cwd: root });
    for (const path of files
      .toString()
      .split('\0')
      .filter((one) => one && !one.startsWith('node_modules'))) {
      mkdirSync(dirname(join(copy, path)), { recursive: true });
      cpSync(join(root, path), join(copy, path));
    }
    symlinkSync(join(root, 'node_modules'), join(copy, 'node_modules'));
    let text = readFileSync(join(copy, file), 'utf8');
    for (const [from, to] of changes) {
      if (text.split(from).length !== 2) throw new Error(`${file} holds this not exactly once:\n${from}`);
      text = text.replace(from, () => to);
    }
    writeFileSync(join(copy, file), text);
    const { status, stdout, stderr } = spawnSync(
      'npx',
      ['vitest', 'run', '--project', 'faults', 'schedules', '--bail', '1'],
      {
        cwd: copy,
        env: { ...process.env, SCHEDULES: MOST_SCHEDULES, SHRINK: 'no', NO_COLOR: '1' },
        encoding: 'utf8',
      },
    );
    const output = stdout + stderr;
    const failed = /Property failed after (\d+) tests\s*\{ seed: (-?\d+)/.exec(output);
    if (status === 0) return null;
    if (!failed) throw new Error(`the schedules did not run:\n${output}`);
    const seen = /Caused by: Broken: (.*)/.exec(output)?.[1];
    if (!seen) throw new Error(`something else than an invariant broke:\n${output}`);
    return { schedules: Number(failed[1]), seed: failed[2], seen };
  } finally {
    rmSync(copy, { recursive: true, force: true });
  }
}
