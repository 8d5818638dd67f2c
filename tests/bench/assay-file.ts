import { writeFileSync } from 'node:fs';
import { seededRandom } from '#kernels/random.ts';

export const ASSAY_ROWS = 100_000;
const ELEMENTS = 'Ag Al As Ba Be Bi Ca Cd Ce Co Cr Cs Cu Fe Ga Ge Hf In K La Li Mg Mn Mo Na Nb Ni P Pb Rb Re S Sb Sc Se Sn Sr Ta Te Th Ti Tl U V W Y Zn Zr'.split(' ');
export const ASSAY_COLUMNS = ELEMENTS.length + 3;

/** An assay table of 51 columns: hole, from, to and 48 analytes, one value in twenty below detection. */
export function writeAssays(path: string): void {
  const random = seededRandom(5);
  const lines = [['hole', 'from', 'to', ...ELEMENTS.map((element) => `${element}_ppm`)].join(',')];
  for (let row = 0; row < ASSAY_ROWS; row++) {
    const cells = ELEMENTS.map(() => (random.uniform() < 0.05 ? '<0.5' : (100 * random.uniform()).toFixed(2)));
    lines.push([`H${String(Math.floor(row / 200)).padStart(4, '0')}`, row % 200, (row % 200) + 1, ...cells].join(','));
  }
  writeFileSync(path, lines.join('\n'));
}
