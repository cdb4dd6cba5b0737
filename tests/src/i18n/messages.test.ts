import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, it } from 'vitest';

const SRC = join(import.meta.dirname, '../../../src');
const EN = join(SRC, 'i18n/en');

const filesUnder = (folder: string): string[] =>
  readdirSync(folder, { withFileTypes: true, recursive: true })
    .filter((entry) => entry.isFile() && /\.(vue|ts)$/.test(entry.name))
    .map((entry) => join(entry.parentPath, entry.name));

const messages: Record<string, unknown> = Object.fromEntries(
  readdirSync(EN).map((name) => [
    name.replace('.json', ''),
    JSON.parse(readFileSync(join(EN, name), 'utf8')) as unknown,
  ]),
);

const at = (key: string): unknown =>
  key.split('.').reduce<unknown>((node, part) => (node as Record<string, unknown> | undefined)?.[part], messages);

/** `t('a.b')`, `$t("a.b")` and keypath="a.b"; also label: 'common.nav.x', which a component translates. */
const WHOLE_KEY = /(?:\bt|\$t)\(\s*['"]([\w.]+)['"]|keypath="([\w.]+)"|label: '(common\.nav\.\w+)'/g;
/** t(`a.b.${x}`): what comes before the variable part has to be a group of messages. */
const KEY_STEM = /(?:\bt|\$t)\(\s*`([\w.]+)\.\$\{/g;

const uses = filesUnder(SRC).flatMap((file) => {
  const text = readFileSync(file, 'utf8');
  const where = file.slice(SRC.length + 1);
  const whole = [...text.matchAll(WHOLE_KEY)].map((hit) => ({
    where,
    key: (hit[1] ?? hit[2] ?? hit[3])!,
    isStem: false,
  }));
  const stems = [...text.matchAll(KEY_STEM)].map((hit) => ({ where, key: hit[1]!, isStem: true }));
  return [...whole, ...stems];
});

it('every message a screen asks for is written', () => {
  expect(uses.length).toBeGreaterThan(100);
  const missing = uses.filter(({ key, isStem }) => typeof at(key) !== (isStem ? 'object' : 'string'));
  expect(missing).toEqual([]);
});

it('no message scolds or jokes', () => {
  expect(JSON.stringify(messages)).not.toMatch(/oops|invalid|human error/i);
});
