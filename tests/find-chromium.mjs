/** Finds Debian's Chromium, installs it where this process may, or throws one line that says what to install. */
import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';

const places = ['/usr/bin/chromium', '/usr/bin/chromium-browser', '/usr/bin/google-chrome', '/usr/bin/google-chrome-stable'];

const found = () => [process.env.DOWNREACH_CHROMIUM, ...places].find((path) => path && existsSync(path));

/** Installs Debian packages; false where this is not possible. */
export function installPackages(packages) {
  if (process.getuid?.() !== 0 || !existsSync('/usr/bin/apt-get')) return false;
  const run = (args) => spawnSync('apt-get', args, { stdio: ['ignore', 'ignore', 'inherit'], env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' } }).status === 0;
  return run(['update', '-qq']) && run(['install', '-y', '-qq', '--no-install-recommends', ...packages]);
}

export function findChromium() {
  const path = found() ?? (installPackages(['chromium', 'fonts-liberation']) ? found() : undefined);
  if (!path) throw new Error('The browser tests need Chromium: run "apt-get install chromium", or set DOWNREACH_CHROMIUM to a Chromium or Chrome binary');
  return path;
}
