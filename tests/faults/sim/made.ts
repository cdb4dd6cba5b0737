import { canonicalText, digestOf } from '@shared/schemas/canonical';
import type { RawEdit } from '@shared/schemas/edit';
import type { RawRun } from '@shared/schemas/run';

/** The model: what people made, on which phone, as whom. Nothing else may exist anywhere. */
export interface Made {
  type: 'run' | 'edit';
  id: string;
  phone: number;
  /** Store it was made in, as the page said; unknown while a page is still loading. */
  owner: string | null;
  /** refusable: the server is to refuse it, with a reason. */
  fate: 'good' | 'refusable';
  /** Somebody was told that it is kept. */
  isKept: boolean;
  /** Set when it was first seen on a disk; the same for ever after. */
  digest: string | null;
  raw: string | null;
  run_id?: string;
  /** Instants of the taps, µs of the page's clock, and how many of them were on disk for certain. */
  taps?: { at_us: number[]; kept: number };
}

export class MadeThings {
  private readonly all = new Map<string, Made>();

  add(made: Omit<Made, 'digest' | 'raw' | 'isKept'>): Made {
    const whole = { ...made, digest: null, raw: null, isKept: false };
    this.all.set(made.id, whole);
    return whole;
  }

  get = (id: string): Made | undefined => this.all.get(id);
  every = (): Made[] => [...this.all.values()];
}

export const keyedRun = (id: string, wall_ms: number, swings: number, note: string): RawRun => ({
  format: 'swaymark-run',
  version: 1,
  id,
  capture: {
    kind: 'keyed_total',
    counted_to: swings,
    first_count: 'zero',
    total_us: swings * 2_007_000,
    reading_step_us: 10_000,
  },
  rig: null,
  amplitudes: [],
  note,
  made: {
    wall_ms,
    zone_offset_min: 0,
    app_version: '0.0.0',
    cautions_seen_wall_ms: null,
    device_id: '018f0000-0000-4000-8000-00000000d001',
  },
});

/** A run of a format the server does not know: it is to be refused and must hold up nothing. */
export const runOfAnotherKind = (run: RawRun): RawRun =>
  ({ ...run, capture: { kind: 'sundial', shadow_mm: 12 } }) as unknown as RawRun;

export const noteEdit = (id: string, run_id: string, wall_ms: number, text: string): Omit<RawEdit, 'made_seq'> => ({
  format: 'swaymark-edit',
  version: 1,
  id,
  run_id,
  made_wall_ms: wall_ms,
  reason: '',
  change: { kind: 'note', text },
});

/** Why this text is not what was made under that id; null when it is. */
export function whyNotMade(made: Made, digest: string, raw: string): string | null {
  if (digestOf(raw) !== digest) return 'its text and its digest differ';
  if (made.digest !== null) return made.digest === digest && made.raw === raw ? null : 'its bytes changed';
  const content = JSON.parse(raw) as RawRun | RawEdit;
  if (canonicalText(content) !== raw) return 'its text is not canonical';
  if (content.id !== made.id) return 'another id is inside';
  if (made.type === 'edit' && (content as RawEdit).run_id !== made.run_id) return 'it is of another run';
  if (made.taps) return whyNotTapped(made.taps, content as RawRun);
  return null;
}

/** The marks are the taps, none made up; those known to be kept are all there. */
function whyNotTapped({ at_us, kept }: NonNullable<Made['taps']>, { capture }: RawRun): string | null {
  if (capture.kind !== 'tap') return 'it is no tap run';
  const { mark_us } = capture;
  const expected = at_us.slice(0, mark_us.length).map((at) => at - at_us[0]!);
  if (JSON.stringify(mark_us) !== JSON.stringify(expected))
    return `its marks are ${mark_us.join()}, taps ${expected.join()}`;
  return mark_us.length < kept ? `${kept} taps were kept, ${mark_us.length} are left` : null;
}
