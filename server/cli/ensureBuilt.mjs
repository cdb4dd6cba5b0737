import { spawnSync } from 'node:child_process';
import { existsSync, readdirSync, statSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

/**
 * Runs before `npm start` and `npm run demo`, as plain Node: builds what is missing in dist/ or older
 * than what it is made from, and says so. Says what to do when the build tools are not installed.
 */
const root = join(dirname(fileURLToPath(import.meta.url)), '..', '..');
const vite = join(root, 'node_modules', 'vite', 'bin', 'vite.js');
const BUILDS = [
  {
    name: 'pages',
    made: 'dist/client/index.html',
    from: ['src', 'shared', 'public', 'index.html', 'vite.config.ts', 'package-lock.json'],
    args: ['build'],
  },
  {
    name: 'server',
    made: 'dist/server/index.js',
    from: ['server', 'shared', 'vite.config.ts', 'package-lock.json'],
    args: ['build', '--ssr', '--mode', 'server'],
  },
];

for (const build of BUILDS) {
  const made = join(root, build.made);
  if (existsSync(made) && statSync(made).mtimeMs >= newest(build.from)) continue;
  if (!existsSync(vite)) {
    console.error(
      `The ${build.name} must be built, and the build tools are not installed. Run "npm ci --include=dev" and start ` +
        'again, or copy dist/ from a machine where it was built.',
    );
    process.exit(1);
  }
  console.log(`Building the ${build.name} …`);
  const { status } = spawnSync(process.execPath, [vite, ...build.args, '--logLevel', 'warn'], {
    cwd: root,
    stdio: 'inherit',
  });
  if (status !== 0) process.exit(status ?? 1);
}

/** Time of the latest change among files and folders, ms since 1970. */
function newest(paths) {
  return Math.max(
    0,
    ...paths.map((path) => {
      const full = join(root, path);
      if (!existsSync(full)) return 0;
      const found = statSync(full);
      if (!found.isDirectory()) return found.mtimeMs;
      return newest(readdirSync(full).map((name) => join(path, name)));
    }),
  );
}
