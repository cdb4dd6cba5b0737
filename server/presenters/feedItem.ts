import type { Analysis } from '@shared/schemas/analysis';
import type { Author, FeedItem } from '@shared/schemas/sync';
import { presentReceipt, type Received } from './receipt';

export interface RunForFeed extends Received {
  id: string;
  digest: string;
  raw: string;
  owner_id: string;
  class_id: string | null;
  bench: number | null;
  clock_skew_ms: number;
}
export interface EditForFeed extends Received {
  id: string;
  run_id: string;
  digest: string;
  raw: string;
  author_id: string;
}

export const presentRunItem = (run: RunForFeed, author: (id: string) => Author): FeedItem => ({
  type: 'run',
  seq: run.seq,
  id: run.id,
  digest: run.digest,
  raw: run.raw,
  class_id: run.class_id,
  bench: run.bench,
  author: author(run.owner_id),
  receipt: presentReceipt(run),
  clock_skew_ms: run.clock_skew_ms,
});

export const presentEditItem = (edit: EditForFeed, author: (id: string) => Author): FeedItem => ({
  type: 'edit',
  seq: edit.seq,
  id: edit.id,
  run_id: edit.run_id,
  digest: edit.digest,
  raw: edit.raw,
  author: author(edit.author_id),
  receipt: presentReceipt(edit),
});

export const presentAnalysisItem = (seq: number, body: string): FeedItem => ({
  type: 'analysis',
  seq,
  analysis: JSON.parse(body) as Analysis,
});
