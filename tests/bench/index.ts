/** `npm run bench` runs all benchmarks, `npm run bench -- NAME …` some. */
const benches: Record<string, () => Promise<unknown>> = {
  coverage: () => import('./coverage'),
  fit: () => import('./fit'),
  fitInBrowser: () => import('./fitInBrowser'),
  flags: () => import('./flags'),
  phones: () => import('./phones'),
  tap: () => import('./tap'),
};

export {};

const asked = process.argv.slice(2);
const unknown = asked.filter((name) => !benches[name]);
if (unknown.length > 0) {
  console.error(`no benchmark ${unknown.join(', ')}; there are ${Object.keys(benches).join(', ')}`);
  process.exit(2);
}
for (const name of asked.length > 0 ? asked : Object.keys(benches)) {
  console.log(`\n# ${name}`);
  await benches[name]!();
}
