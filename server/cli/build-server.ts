import { mkdir, readFile, readdir, rm, writeFile } from 'node:fs/promises';
import { dirname, join } from 'node:path';
import ts from 'typescript';
import * as z from 'zod';

/**
 * Emits the server for production: each `.ts` file becomes one `.js` file at the same place under
 * `dist/node`, so that worker files keep their places. Types are checked elsewhere (`npm run typecheck`).
 *
 * The compiler rewrites relative imports; the aliases of package.json keep their `.ts`, so
 * `dist/node` gets a package.json of its own that leads them to the emitted files.
 */
const ROOMS = ['server', 'workers', 'migrations', 'seeds'];
/** Compiled apart (`build-simd.ts`). */
const LEFT_OUT = join('workers', 'simd');
const OUT = join('dist', 'node');

const compilerOptions: ts.CompilerOptions = {
  target: ts.ScriptTarget.ES2023,
  module: ts.ModuleKind.ESNext,
  verbatimModuleSyntax: true,
  rewriteRelativeImportExtensions: true,
  inlineSourceMap: true,
};

async function emit(file: string): Promise<void> {
  const source = await readFile(file, 'utf8');
  const { outputText } = ts.transpileModule(source, { fileName: file, compilerOptions });
  const target = join(OUT, file.replace(/\.ts$/, '.js'));
  await mkdir(dirname(target), { recursive: true });
  await writeFile(target, outputText);
}

async function filesOf(room: string): Promise<string[]> {
  const entries = await readdir(room, { recursive: true, withFileTypes: true });
  return entries
    .filter((entry) => entry.isFile() && entry.name.endsWith('.ts') && entry.parentPath !== LEFT_OUT)
    .map((entry) => join(entry.parentPath, entry.name));
}

async function writeManifest(): Promise<void> {
  const manifest = z
    .object({ version: z.string(), imports: z.record(z.string(), z.string()) })
    .parse(JSON.parse(await readFile('package.json', 'utf8')));
  const imports = Object.fromEntries(Object.entries(manifest.imports).map(([alias, target]) => [`${alias}.ts`, `${target}.js`]));
  await writeFile(join(OUT, 'package.json'), `${JSON.stringify({ type: 'module', version: manifest.version, imports }, null, 2)}\n`);
}

await rm(OUT, { recursive: true, force: true });
const files = (await Promise.all(ROOMS.map(filesOf))).flat();
for (const file of files) await emit(file);
await writeManifest();
process.stdout.write(`server: ${files.length} files in ${OUT}\n`);
