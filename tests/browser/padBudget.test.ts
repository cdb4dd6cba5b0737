import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { gzipSync } from 'node:zlib';
import { expect, it } from 'vitest';

/** Design budget for what stands between a cold phone and the first tap. */
const BUDGET_BYTES = 170_000;
/** The pages that must be there before a tap can be: the app's entry, the pad's frame and the pad itself. */
const NEEDED = ['index.html', 'src/layouts/PadLayout.vue', 'src/pages/PadPage.vue'];

interface Chunk {
  file: string;
  imports?: string[];
}

it('the pad can be used after at most 170 kB of gzipped JavaScript', () => {
  const built = 'dist/client';
  const chunks = JSON.parse(readFileSync(join(built, '.vite/manifest.json'), 'utf8')) as Record<string, Chunk>;
  const files = new Set<string>();
  const follow = (key: string) => {
    const chunk = chunks[key];
    if (!chunk) throw new Error(`${key} is not in the build`);
    if (files.has(chunk.file)) return;
    files.add(chunk.file);
    chunk.imports?.forEach(follow);
  };
  NEEDED.forEach(follow);
  const scripts = [...files].filter((file) => file.endsWith('.js'));
  const total = scripts.reduce((sum, file) => sum + gzipSync(readFileSync(join(built, file))).length, 0);
  process.stdout.write(
    `JavaScript before the pad can be used: ${(total / 1000).toFixed(1)} kB gzip, ${scripts.length} files\n`,
  );
  expect(total).toBeLessThanOrEqual(BUDGET_BYTES);
});
