import { existsSync, readFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { expect, it } from 'vitest';
import { i18n } from '@/i18n';

const SRC = join(import.meta.dirname, '../../../src');
/** Where the road to the first tap begins; pages behind the router's other addresses are not followed. */
const BEGIN = ['main.ts', 'layouts/PadLayout.vue', 'pages/PadPage.vue'].map((path) => join(SRC, path));
const NOT_FOLLOWED = ['routes.ts', 'warm.ts'];

function onTheRoad(): Set<string> {
  const seen = new Set<string>();
  const follow = (file: string) => {
    if (seen.has(file)) return;
    seen.add(file);
    if (NOT_FOLLOWED.some((name) => file.endsWith(name))) return;
    for (const [, path] of readFileSync(file, 'utf8').matchAll(/(?:from|import)\s*\(?['"]([@./][^'"]+)['"]/g)) {
      const whole = path!.startsWith('@/') ? join(SRC, path!.slice(2)) : join(dirname(file), path!);
      const found = [whole, `${whole}.ts`, `${whole}.vue`].find((name) => /\.(ts|vue)$/.test(name) && existsSync(name));
      if (found) follow(found);
    }
  };
  BEGIN.forEach(follow);
  return seen;
}

it('the pad and all it may show need no texts but those that are there before the others are fetched', () => {
  const road = [...onTheRoad()];
  expect(road.length).toBeGreaterThan(40);
  const asked = road.flatMap((file) =>
    [...readFileSync(file, 'utf8').matchAll(/\bt\(\s*['"`]([a-z]\w*)\./gi)].map(([, name]) => name!),
  );
  const there = Object.keys(i18n.global.getLocaleMessage('en'));
  expect([...new Set(asked)].filter((name) => !there.includes(name))).toEqual([]);
});
