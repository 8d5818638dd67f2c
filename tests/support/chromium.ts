import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';

const PLACES = [
  process.env['CHROMIUM_PATH'],
  '/usr/bin/chromium',
  '/usr/bin/chromium-browser',
  '/usr/bin/google-chrome',
  '/Applications/Chromium.app/Contents/MacOS/Chromium',
  '/Applications/Google Chrome.app/Contents/MacOS/Google Chrome',
];

/** Path of an installed Chromium (or Chrome), or null. `CHROMIUM_PATH` wins. */
export function findChromium(): string | null {
  return PLACES.find((place) => place && existsSync(place)) ?? null;
}

/** Finds Chromium, or installs Debian's when run as root where apt-get exists; null when neither works. */
export function ensureChromium(): string | null {
  const found = findChromium();
  if (found) return found;
  const isRoot = process.getuid?.() === 0;
  if (!isRoot || spawnSync('which', ['apt-get']).status !== 0) return null;
  console.log("Installing Debian's chromium for the browser tests…");
  const apt = ['-o', 'DPkg::Lock::Timeout=400'];
  spawnSync('apt-get', [...apt, 'update'], { stdio: 'inherit' });
  spawnSync('apt-get', [...apt, 'install', '-y', '--no-install-recommends', 'chromium'], { stdio: 'inherit' });
  return findChromium();
}

/** Flags for a headless run as root, without background traffic. */
export const CHROMIUM_FLAGS = [
  '--no-sandbox',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
];
