import { spawn, type ChildProcess } from 'node:child_process';
import { cpSync, existsSync } from 'node:fs';
import { createServer } from 'node:net';
import { setTimeout as pause } from 'node:timers/promises';
import { tempFolder } from './temp-instance.ts';

export interface BuiltServer {
  url: string;
  /** SIGTERM, then the exit code once the process is gone. */
  stop(): Promise<number | null>;
}

const ENTRY = 'dist/node/server/index.js';
/** The first start fills the demonstration deposit. */
const READY_LIMIT_MS = 280_000;

function freePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const server = createServer();
    server.once('error', reject);
    server.listen(0, () => {
      const address = server.address();
      server.close(() =>
        address !== null && typeof address === 'object'
          ? resolve(address.port)
          : reject(new Error('no free port')),
      );
    });
  });
}

const isReady = (url: string): Promise<boolean> =>
  fetch(`${url}/api/health/ready`).then(
    ({ ok }) => ok,
    () => false,
  );

async function untilReady(child: ChildProcess, url: string, said: () => string): Promise<void> {
  const end = Date.now() + READY_LIMIT_MS;
  while (Date.now() < end) {
    if (child.exitCode !== null)
      throw new Error(`the server ended with ${child.exitCode} before it was ready:\n${said()}`);
    if (await isReady(url)) return;
    await pause(250);
  }
  child.kill('SIGKILL');
  throw new Error(`the server was not ready within ${READY_LIMIT_MS / 1000} s:\n${said()}`);
}

/**
 * Starts the built product on a free port and a folder of its own, as `npm start` does after its
 * build: a demonstration that fills itself once.
 *
 * `JOURNEY_DATA` names the data folder of a filled instance to begin from (a copy is used).
 */
export async function startBuiltServer(): Promise<BuiltServer> {
  if (!existsSync(ENTRY) || !existsSync('dist/client/index.html'))
    throw new Error('The product is not built: expected dist/client and dist/node. Run npm run build first.');
  const folder = tempFolder();
  const filled = process.env['JOURNEY_DATA'];
  if (filled) cpSync(filled, folder.path, { recursive: true });
  const port = await freePort();
  const url = `http://localhost:${port}`;
  const env = {
    PATH: process.env['PATH'],
    PORT: String(port),
    DATA_DIR: folder.path,
    INSTANCE: 'demo',
    LOG_LEVEL: 'warn',
  };
  const child = spawn(process.execPath, ['--enable-source-maps', ENTRY], { env, stdio: 'pipe' });
  let output = '';
  const keep = (chunk: Buffer): void => void (output = (output + chunk.toString()).slice(-8000));
  child.stdout.on('data', keep);
  child.stderr.on('data', keep);
  const gone = new Promise<number | null>((resolve) => child.once('exit', resolve));
  try {
    await untilReady(child, url, () => output);
  } catch (error) {
    folder.remove();
    throw error;
  }
  return {
    url,
    async stop() {
      child.kill('SIGTERM');
      const code = await gone;
      folder.remove();
      return code;
    },
  };
}
