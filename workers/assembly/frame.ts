import { FRAME, sideColumn, type FaultPlane } from '#contract/snapshots.ts';
import { FAULT_SIDES } from '#kernels/recipe/fault-sides.ts';
import type { ColumnStore } from '#server/db/column-store.ts';
import type { DrillRows } from './drill-rows.ts';
import { sidesOf } from './faults.ts';
import type { LoggedCategory } from './logged-categories.ts';
import type { SurfaceRows } from './surface-rows.ts';

export interface FrameParts {
  drill: DrillRows;
  samples: string[];
  campaigns: string[];
  surface: SurfaceRows;
  surfaceCampaigns: string[];
  lithology: LoggedCategory;
  weathering: LoggedCategory;
  faults: FaultPlane[];
}

/** Surface samples count one each where intervals count their metres. */
const SAMPLE_WEIGHT = 1;

function join(drill: Float64Array, surface: Float64Array): Float64Array {
  const whole = new Float64Array(drill.length + surface.length);
  whole.set(drill);
  whole.set(surface, drill.length);
  return whole;
}

function encode(texts: readonly string[]): { codes: Float64Array; dictionary: string[] } {
  const dictionary = [...new Set(texts)].filter((text) => text !== '').sort();
  const placeOf = new Map(dictionary.map((text, place) => [text, place]));
  return { codes: Float64Array.from(texts, (text) => placeOf.get(text) ?? Number.NaN), dictionary };
}

/** Writes the frame: one row per interval, then one per surface sample. Answers its table and the rock codes. */
export function writeFrame(store: ColumnStore, depositId: number, jobId: number, parts: FrameParts) {
  const { drill, surface, lithology, weathering } = parts;
  const none = new Float64Array(surface.nRows).fill(Number.NaN);
  const nRows = drill.hole.length + surface.nRows;
  const tableId = store.createTable({ depositId, nRows, purpose: 'intervals of a snapshot', jobId });
  const number = (name: string, values: Float64Array): void => store.writeNumbers(tableId, { name, unit: 'm' }, values);
  const category = (name: string, texts: readonly string[]): void => {
    const { codes, dictionary } = encode(texts);
    store.writeCategory(tableId, { name }, codes, dictionary);
  };
  const blanks = new Array<string>(surface.nRows).fill('');
  category(FRAME.hole, [...drill.hole, ...blanks]);
  number(FRAME.from, join(drill.fromM, none));
  number(FRAME.to, join(drill.toM, none));
  const lengths = join(drill.lengthM, new Float64Array(surface.nRows).fill(SAMPLE_WEIGHT));
  number(FRAME.length, lengths);
  const [x, y, z] = [join(drill.x, surface.x), join(drill.y, surface.y), join(drill.z, surface.z)];
  number(FRAME.x, x);
  number(FRAME.y, y);
  number(FRAME.z, z);
  store.writeCategory(tableId, { name: FRAME.support }, Float64Array.from({ length: nRows }, (_, i) => (i < drill.hole.length ? 0 : 1)), ['drill', 'surface']);
  store.writeText(tableId, { name: FRAME.sample }, [...parts.samples, ...surface.sample]);
  category(FRAME.campaign, [...parts.campaigns, ...parts.surfaceCampaigns]);
  const rockTexts = [...Array.from(lithology.codes, (code) => lithology.dictionary[code] ?? ''), ...surface.code];
  const rock = encode(rockTexts);
  store.writeCategory(tableId, { name: FRAME.lithology }, rock.codes, rock.dictionary);
  store.writeNumbers(tableId, { name: FRAME.lithologyDominance }, join(lithology.dominance, none));
  store.writeCategory(tableId, { name: FRAME.weathering }, join(weathering.codes, none), weathering.dictionary);
  for (const fault of parts.faults) store.writeCategory(tableId, { name: sideColumn(fault.name) }, sidesOf(fault, x, y, z), [...FAULT_SIDES]);
  return { tableId, nRows, lengths, rock };
}
