import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import * as z from 'zod';

/**
 * Completes `dist/node`: a package.json whose import aliases lead from the written `.ts` names to
 * the emitted `.js` files, since the compiler rewrites relative imports only.
 */
const root = process.cwd();
const manifest = z
  .object({ version: z.string(), imports: z.record(z.string(), z.string()) })
  .parse(JSON.parse(readFileSync(join(root, 'package.json'), 'utf8')));

const imports = Object.entries(manifest.imports).map(([alias, target]) => [`${alias}.ts`, `${target}.js`]);
const emitted = { type: 'module', version: manifest.version, imports: Object.fromEntries(imports) };
writeFileSync(join(root, 'dist', 'node', 'package.json'), `${JSON.stringify(emitted, null, 2)}\n`);
