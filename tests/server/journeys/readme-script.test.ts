import { execFile } from 'node:child_process';
import { createHash } from 'node:crypto';
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { promisify } from 'node:util';
import { expect, test } from 'vitest';
import { DEPOSIT_BODY } from '#tests/support/people.ts';
import { tempFolder } from '#tests/support/temp-instance.ts';
import { testClient } from '#tests/support/test-client.ts';
import { SMALL_ROWS, smallTables } from './small-tables.ts';

const run = promisify(execFile);

/** The first script of the README's section on scripts, as a reader would copy it. */
function scriptOfReadme(): string {
  const readme = readFileSync(new URL('../../../README.md', import.meta.url), 'utf8');
  const section = readme.split('\n## By script\n')[1]?.split('\n## ')[0] ?? '';
  const script = /```js\n([\s\S]+?)```/.exec(section)?.[1];
  if (script === undefined) throw new Error('README.md: expected a script under “By script”, found none');
  return script;
}

test('the README’s script, copied, takes tables to codes', { timeout: 240_000 }, async () => {
  const client = await testClient({ compute: true });
  const made = await client.as('lead').post('/api/deposits').send(DEPOSIT_BODY);
  const { id } = made.body;
  const token = await client.token('work', 'lead', Number(id));
  const folder = tempFolder();
  try {
    const tables = smallTables();
    for (const { name, content } of tables) writeFileSync(join(folder.path, name), content);
    writeFileSync(join(folder.path, 'first-pass.mjs'), scriptOfReadme());
    const { stdout } = await run(process.execPath, ['first-pass.mjs', client.url, String(id), ...tables.map(({ name }) => name)], { cwd: folder.path, env: { SELVAGE_TOKEN: token } });
    const codes = readFileSync(join(folder.path, 'codes.csv'));
    expect(stdout).toContain(createHash('sha256').update(codes).digest('hex'));
    const lines = codes.toString('utf8').trimEnd().split('\n').slice(1);
    expect(lines).toHaveLength(SMALL_ROWS);
    expect(lines.filter((line) => !/,D\d+,/.test(line))).toEqual([]);
  } finally {
    folder.remove();
  }
});
