import { writeFile, readFile, rm, mkdtemp } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import asc from 'assemblyscript/asc';

/**
 * Compiles the SIMD loops of `workers/simd` (AssemblyScript) and writes the binary as a TypeScript
 * module, so that kernels need no file to read wherever they run.
 */
const ENTRY = 'workers/simd/index.ts';
const OUT = 'workers/kernels/dense/simd-binary.ts';

const folder = await mkdtemp(join(tmpdir(), 'selvage-simd-'));
const binaryFile = join(folder, 'loops.wasm');
const { error } = await asc.main([
  ENTRY, '--outFile', binaryFile, '--optimizeLevel', '3', '--runtime', 'stub', '--noAssert',
  '--enable', 'simd', '--importMemory', '--use', 'abort=',
], { stderr: process.stderr });
if (error) throw error;
const binary = await readFile(binaryFile);
await rm(folder, { recursive: true });
await writeFile(
  OUT,
  `// Made by server/cli/build-simd.ts from workers/simd; not kept in git.
const base64 =
  '${binary.toString('base64')}';

export const SIMD_BINARY: Uint8Array<ArrayBuffer> = Uint8Array.from(atob(base64), (letter) => letter.charCodeAt(0));
`,
);
process.stdout.write(`SIMD loops: ${binary.length} bytes in ${OUT}\n`);
