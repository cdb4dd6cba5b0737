/**
 * Before the tests: make sure there is a Chromium. Installs Debian's where it may (root with apt-get),
 * otherwise says exactly what to do and stops.
 */
import { execFileSync } from 'node:child_process';
import { existsSync } from 'node:fs';

const path = process.env.CHROMIUM_PATH ?? '/usr/bin/chromium';
const howTo = 'Install it with "apt-get install -y chromium" as root, or set CHROMIUM_PATH to a Chromium you have.';

function stop(message) {
  console.error(`\n${message}\n${howTo}\n`);
  process.exit(1);
}

if (!existsSync(path)) {
  if (process.env.CHROMIUM_PATH) stop(`CHROMIUM_PATH says ${path}, and there is nothing there.`);
  const isRoot = process.getuid?.() === 0;
  if (!isRoot || !existsSync('/usr/bin/apt-get'))
    stop(`The browser tests need Chromium at ${path}; it is not there and cannot be installed from here.`);
  console.log("Installing Debian's Chromium for the browser tests …");
  try {
    const options = { stdio: 'inherit', env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' } };
    execFileSync('apt-get', ['update', '-q'], options);
    execFileSync('apt-get', ['install', '-y', '-q', '--no-install-recommends', 'chromium'], options);
  } catch (error) {
    stop(`apt-get could not install Chromium: ${error.message}`);
  }
  if (!existsSync(path)) stop(`apt-get ran, and there is still no Chromium at ${path}.`);
}
