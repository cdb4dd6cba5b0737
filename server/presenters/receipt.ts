import type { Receipt } from '@shared/schemas/sync';

export interface Received {
  seq: number;
  receipt_code: string;
  received_ms: number;
}

export const presentReceipt = (row: Received): Receipt => ({
  code: row.receipt_code,
  received_wall_ms: row.received_ms,
  server_seq: row.seq,
});
