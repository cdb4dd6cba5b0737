import { parse } from 'papaparse';
import { expect, it } from 'vitest';
import { runCsv } from '@/components/desk/runCsv';
import type { RunLine } from '@/components/desk/runLines';

const line = (parts: Partial<RunLine> = {}): RunLine => ({
  id: '018f0000-0000-7000-8000-000000000001',
  bench: 3,
  who: 'Otter',
  kind: 'tap',
  length_m: { value: 0.998, u: 0.001 },
  swings: 20,
  period_s: { value: 2.0123, u: 0.002, expanded_u: 0.0042 },
  small_period_s: { value: 2.0064, u: 0.0021, expanded_u: 0.0044 },
  g_m_s2: { value: 9.789, u: 0.02, expanded_u: 0.041 },
  open_flags: 1,
  isSetAside: false,
  received_wall_ms: Date.UTC(2031, 1, 3, 9, 30),
  receipt: 'K7QM',
  note: '=secret',
  order: 1,
  ...parts,
});
const read = (text: string, delimiter: string) =>
  parse<Record<string, string>>(text, { header: true, delimiter, skipEmptyLines: true }).data;

it('holds each run with its figures in units its heading names, and nobody’s name or note', () => {
  const text = runCsv([line(), line({ bench: null, small_period_s: null, g_m_s2: null, isSetAside: true })], '.');
  const [first, second] = read(text, ',');
  expect(first).toEqual({
    run_id: '018f0000-0000-7000-8000-000000000001',
    bench: '3',
    kind: 'tap',
    length_m: '0.998',
    swings: '20',
    period_s: '2.0123',
    period_u_s: '0.002',
    small_period_s: '2.0064',
    small_period_expanded_u_s: '0.0044',
    g_m_s2: '9.789',
    g_expanded_u_m_s2: '0.041',
    open_flags: '1',
    set_aside: 'no',
    received_utc: '2031-02-03T09:30:00.000Z',
  });
  expect(second).toMatchObject({ bench: '', small_period_s: '', g_m_s2: '', set_aside: 'yes' });
  expect(text).not.toMatch(/Otter|secret/);
});

it('with decimal commas has semicolons between cells, and no number is quoted', () => {
  const text = runCsv([line()], ',');
  expect(read(text, ';')[0]).toMatchObject({ small_period_s: '2,0064', length_m: '0,998' });
  expect(text).not.toContain('"');
});

it.each(['=HYPERLINK("http://example.org")', '+1', '-1', '@SUM(A1)', '\tx'])(
  'a text like %j is no formula in a spreadsheet',
  (kind) => {
    const [row] = read(runCsv([line({ kind: kind as RunLine['kind'] })], '.'), ',');
    expect(row!.kind).toBe(`'${kind}`);
  },
);
