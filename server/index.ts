import { readEnv } from './lib/env.ts';
import { type Running, start } from './start.ts';

/** Longest a clean stop may take before the process ends anyway. */
const STOP_LIMIT_MS = 14_000;

function say(running: Running, publicUrl: string): void {
  const lines = [`Selvage answers at ${publicUrl}`];
  if (running.demo) {
    lines.push('', 'Demonstration sign-ins (invented people, on invented data):');
    for (const { name, role, email, password } of running.demo.signIns) lines.push(`  ${role.padEnd(16)} ${email}  ${password}  (${name})`);
  }
  process.stdout.write(`\n${lines.join('\n')}\n\n`);
}

function stopOn(running: Running): void {
  let isStopping = false;
  const stop = (exitCode: number): void => {
    if (isStopping) return;
    isStopping = true;
    setTimeout(() => process.exit(1), STOP_LIMIT_MS).unref();
    running.close().then(
      () => process.exit(exitCode),
      (error: unknown) => {
        running.log.error({ event: 'stop-failed', err: error }, 'the stop was not clean');
        process.exit(1);
      },
    );
  };
  process.once('SIGTERM', () => stop(0));
  process.once('SIGINT', () => stop(0));
  const lastResort = (error: unknown): void => {
    running.log.fatal({ event: 'last-resort', err: error }, 'unexpected failure: stopping for a restart');
    running.markBroken();
    stop(1);
  };
  process.on('uncaughtException', lastResort);
  process.on('unhandledRejection', lastResort);
}

try {
  const env = readEnv(process.env);
  const running = await start(env, (line) => process.stdout.write(`${line}\n`));
  stopOn(running);
  say(running, env.publicUrl);
} catch (error) {
  process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`);
  process.exit(1);
}
