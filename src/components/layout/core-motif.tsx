import { seededRandom } from '#kernels/random.ts';
import {
  RockPatternDefs,
  rockFill,
  type RockPattern,
} from '#src/components/charts/rock-patterns.tsx';

interface Piece {
  from: number;
  to: number;
  rock: RockPattern;
}

interface Hole {
  start: number;
  pieces: Piece[];
  /** Depths where the ore begins and ends. */
  edges: [number, number];
}

const SEED = 20;
const HOLES = 17;
const PITCH = 46;
const WIDTH = 900;
const CORE_PX = 24;
const TICKS = Array.from({ length: 42 }, (_, index) => index);

/** An invented hole: host rock with dykes, a body with a clean top, a base that fingers out. */
function inventHole(random: ReturnType<typeof seededRandom>, index: number): Hole {
  const between = (low: number, high: number) => low + random.uniform() * (high - low);
  const pieces: Piece[] = [];
  let at = between(14, 22);
  const start = at;
  const lay = (length: number, rock: RockPattern) => {
    pieces.push({ from: at, to: at + length, rock });
    at += length;
  };
  const top = 300 + 100 * Math.sin(index * 1.05) + between(-40, 90);
  lay(between(80, 120), 'vees');
  lay(between(9, 25), 'plus');
  lay(Math.max(60, top - at), 'vees');
  const upper = at;
  lay(between(50, 95), 'level');
  lay(between(16, 24), 'slant');
  const base = at + between(60, 120);
  while (at < base) {
    lay(between(2.2, 12), random.uniform() < 0.2 ? 'level' : 'dots');
    lay(between(3, random.uniform() < 0.25 ? 28 : 12), 'slant');
  }
  const lower = at;
  const end = at + between(110, 220);
  while (at < end) {
    lay(between(18, 62), 'dots');
    lay(
      between(3, 15),
      random.uniform() < 0.3 ? 'plus' : random.uniform() < 0.5 ? 'vees' : 'slant',
    );
  }
  return { start, pieces, edges: [upper, lower] };
}

function inventHoles(): Hole[] {
  const random = seededRandom(SEED);
  return Array.from({ length: HOLES }, (_, index) => inventHole(random, index));
}

const holes = inventHoles();

/** Holes laid in trays, the edges of the ore marked in copper. Drawn, not measured: it decorates. */
export function CoreMotif({ className }: { className?: string }) {
  const height = HOLES * PITCH;
  return (
    <svg
      viewBox={`0 0 ${WIDTH} ${height}`}
      width={WIDTH}
      height={height}
      aria-hidden
      className={className}
    >
      <RockPatternDefs prefix="motif" />
      {holes.map((hole, index) => (
        <g key={index} transform={`translate(0 ${index * PITCH})`}>
          <rect width={WIDTH} height={34} rx={3} fill="var(--trough)" stroke="var(--trough-deep)" />
          {hole.pieces.map(({ from, to, rock }) => (
            <rect
              key={from}
              x={from}
              y={5}
              width={to - from}
              height={CORE_PX}
              fill={rockFill(rock, 'motif')}
              stroke="var(--rock-mark)"
              strokeWidth={0.6}
            />
          ))}
          {hole.edges.map((edge) => (
            <rect key={edge} x={edge - 2} y={2} width={4} height={30} fill="var(--copper)" />
          ))}
          {TICKS.map((tick) => (
            <path
              key={tick}
              d={`M${tick * 21.95 + 0.5} 36v${tick % 5 === 0 ? 6 : 3}`}
              stroke="var(--rule-firm)"
            />
          ))}
        </g>
      ))}
    </svg>
  );
}
