import { spawn, spawnSync } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, readFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import * as z from 'zod';
import { ensureChromium } from './chromium.ts';

/**
 * `npm test`: lint, types, unit and API tests, build, browser journeys, in that order. Goes on after
 * a failure so that one run tells everything; ends with one plain line that counts all of it.
 */
const reportFolder = mkdtempSync(join(tmpdir(), 'selvage-test-'));
const Report = z.object({ numPassedTests: z.number(), numFailedTests: z.number(), success: z.boolean() });
const total = { passed: 0, failed: 0 };

/** A step that passes or fails; what it prints comes in one piece at its end, so that two may run side by side. */
async function check(name: string, args: string[]): Promise<void> {
  const child = spawn('npx', ['--no-install', ...args], { stdio: ['ignore', 'pipe', 'pipe'] });
  let output = '';
  const keep = (chunk: Buffer): void => void (output += chunk.toString());
  child.stdout.on('data', keep);
  child.stderr.on('data', keep);
  const [status]: unknown[] = await once(child, 'close');
  console.log(`\n— ${name}\n${output}`);
  if (status === 0) total.passed += 1;
  else total.failed += 1;
}

function vitest(name: string, projects: string[]): void {
  const file = join(reportFolder, `${name.replaceAll(' ', '-')}.json`);
  const selected = projects.flatMap((project) => ['--project', project]);
  const reporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${file}`];
  console.log(`\n— ${name}`);
  const { status } = spawnSync('npx', ['--no-install', 'vitest', 'run', ...selected, ...reporters], { stdio: 'inherit' });
  try {
    const report = Report.parse(JSON.parse(readFileSync(file, 'utf8')));
    total.passed += report.numPassedTests;
    total.failed += report.numFailedTests;
    if (status !== 0 && report.numFailedTests === 0) total.failed += 1;
  } catch {
    console.log(`${name}: no report was written`);
    total.failed += 1;
  }
}

// Each takes one core for minutes: side by side.
await Promise.all([check('lint', ['eslint', '.', '--max-warnings', '0']), check('types', ['tsc', '--noEmit'])]);
vitest('unit, reference and API tests', ['numeric', 'node', 'dom']);
await check('build of the client', ['vite', 'build', '--logLevel', 'warn']);
await check('build of the server', ['tsx', 'server/cli/build-server.ts']);
if (ensureChromium()) {
  vitest('browser journeys', ['journeys']);
} else {
  console.log('browser journeys: no Chromium found. Install it (Debian: apt-get install chromium) or set CHROMIUM_PATH.');
  total.failed += 1;
}

console.log(`\n${total.passed} passed, ${total.failed} failed`);
process.exitCode = total.failed === 0 ? 0 : 1;
