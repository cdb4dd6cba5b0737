import type { GateChoice } from '@shared/timing/gateBlocks';
import { readGate } from './readGate';

/** Reads long tables beside the page, so that it stays at hand. */
self.onmessage = ({ data }: MessageEvent<{ text: string; choice: GateChoice | null }>) => {
  self.postMessage(readGate(data.text, data.choice));
};
