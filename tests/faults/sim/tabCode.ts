import { fileURLToPath } from 'node:url';
import { Script } from 'node:vm';
import * as dexie from 'dexie';
import { build } from 'vite';
import * as vue from 'vue';
import * as zod from 'zod';
import type { Page } from './page';

/**
 * The client's code as a tab loads it. It is built once; each tab evaluates it anew, with modules, clock,
 * network, storage and randomness of its own. Only what has no state of its own is shared: `shared/`,
 * the readings of answers, zod, Vue and Dexie's classes.
 */
export type TabCode = (globals: Record<string, unknown>) => Page;

const at = (path: string) => fileURLToPath(new URL(`../../../${path}`, import.meta.url));
const isShared = (id: string) =>
  /^(vue|zod|dexie)$/.test(id) || id.startsWith('@shared/') || id.endsWith('/syncReadings');

/** What a tab may see of the world besides the language; anything else is the real one. */
const GLOBALS = [
  'globalThis',
  'self',
  'window',
  'document',
  'navigator',
  'localStorage',
  'fetch',
  'setTimeout',
  'clearTimeout',
  'setInterval',
  'clearInterval',
  'requestAnimationFrame',
  'performance',
  'crypto',
  'Date',
  'Math',
];

export async function loadTabCode(): Promise<TabCode> {
  const built = await build({
    configFile: false,
    logLevel: 'error',
    root: at(''),
    resolve: { alias: { '@': at('src') } },
    define: { __APP_VERSION__: '"0.0.0"', 'process.env.NODE_ENV': '"production"' },
    ssr: { noExternal: ['pinia', 'uuid'] },
    build: {
      write: false,
      minify: false,
      target: 'es2022',
      ssr: at('tests/faults/sim/page.ts'),
      rollupOptions: { external: isShared, output: { format: 'cjs', codeSplitting: false } },
    },
  });
  if (Array.isArray(built) || !('output' in built)) throw new Error('one build was asked for');
  const [chunk] = built.output;
  const parts = new Map<string, unknown>([
    ['vue', vue],
    ['zod', zod],
    ['dexie', dexie],
  ]);
  for (const id of [...chunk.imports, ...chunk.dynamicImports]) {
    if (id.startsWith('@shared/')) parts.set(id, await import(at(`shared/${id.slice('@shared/'.length)}.ts`)));
    else if (id.endsWith('/syncReadings')) parts.set(id, await import(at('src/api/syncReadings.ts')));
    else if (!parts.has(id)) parts.set(id, await import(id));
  }
  const code = chunk.code.replace(/\bimport\(/g, '__import(');
  const script = new Script(`(function (exports, require, __import, ${GLOBALS.join(', ')}) { ${code}\n})`, {
    filename: 'tab.cjs',
  });
  return (globals) => {
    const own = new Map(parts).set('dexie', globals.dexie);
    const require = (id: string) => own.get(id);
    const load = (id: string) => Promise.resolve(own.get(id));
    const exports: { openPage?: () => Page } = {};
    const evaluate = script.runInThisContext() as (...args: unknown[]) => void;
    evaluate(exports, require, load, ...GLOBALS.map((name) => globals[name]));
    return exports.openPage!();
  };
}
