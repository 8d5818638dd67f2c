import type { DomainEvidence, PopulationPart } from '#contract/domains.ts';
import { splitByCategory } from '#workers/evidence/category-split.ts';
import { inDomainMask, readDomainRows, rowFinder, runsOf, type DomainRows } from '#workers/evidence/domain-rows.ts';
import { evidenceFinding } from '#workers/evidence/finding.ts';
import { orientationSets, readStructures } from '#workers/evidence/orientations.ts';
import { payAnalyte, populationParts, type PayAnalyte } from '#workers/evidence/populations.ts';
import { readAssay, type AssayColumn, type SnapshotTables, type Support } from '#workers/frame/snapshot-tables.ts';
import { QUALIFIER } from '#contract/tables.ts';
import { defineTask } from '#workers/task.ts';

export interface EvidenceInput {
  snapshotId: string;
  tables: SnapshotTables;
  structureTableId: number | null;
  faults: string[];
  support: Support;
  groupingTableId: number;
  payAnalytes: string[];
  domains: { id: number; code: string; name: string; groupLabels: number[]; version: number }[];
  /** Domains to gather evidence for. */
  domainIds: number[];
}

export type FoundEvidence = Omit<DomainEvidence, 'snapshotId' | 'snapshotNumber' | 'createdAt' | 'isStale'> & { domainVersion: number };

export interface EvidenceOutput {
  snapshotId: string;
  evidence: FoundEvidence[];
}

const SEED = 1;

/** Σ metres × grade over rows with a grade; a value below its limit counts half of it. */
function metalOf({ values, qualifiers }: AssayColumn, lengthsM: Float64Array, mask: Uint8Array | null): number {
  let sum = 0;
  values.forEach((value, row) => {
    if ((mask && mask[row] !== 1) || Number.isNaN(value)) return;
    sum += (qualifiers[row] === QUALIFIER.below ? value / 2 : value) * (lengthsM[row] ?? 0);
  });
  return sum;
}

function gradesOf(populations: readonly PopulationPart[], pay: readonly PayAnalyte[], { lengthsM }: DomainRows, mask: Uint8Array): DomainEvidence['grades'] {
  return pay.map(({ variable: analyte, assay }) => {
    const own = populations.find(({ variable, role }) => variable === analyte && role === 'domain');
    const whole = metalOf(assay, lengthsM, null);
    return {
      analyte, mean: own?.mean ?? null, median: own?.median ?? null, cv: own?.cv ?? null, verdict: own?.verdict ?? 'too-few',
      shareOfMetal: whole > 0 ? metalOf(assay, lengthsM, mask) / whole : null,
    };
  });
}

/** Gathers what speaks for and against each domain: splits, orientation, populations before and after, metal. */
export default defineTask<EvidenceInput, EvidenceOutput>((input, { report, store }) => {
  const { snapshotId, tables, support, payAnalytes, domains, domainIds } = input;
  report('read columns', 0);
  const rows = readDomainRows(store(), tables, support, input.groupingTableId, input.faults);
  const pay = payAnalytes.map((variable, place) => {
    report(`screen ${variable}`, (0.1 * place) / payAnalytes.length);
    return payAnalyte(rows, variable, readAssay(store(), tables, support, variable));
  });
  const structures = readStructures(store(), input.structureTableId);
  const findRow = rowFinder(rows);
  const wanted = domains.filter(({ id }) => domainIds.includes(id));
  const evidence = wanted.map(({ id, code, groupLabels, version }, place): FoundEvidence => {
    const tell = (phase: string, share: number): void => report(`${code}: ${phase}`, 0.1 + (0.9 * (place + share)) / wanted.length);
    tell('splits', 0);
    const mask = inDomainMask(rows, groupLabels);
    const inDomain = { levels: ['domain', 'elsewhere'], codes: Int32Array.from(mask, (isIn) => 1 - isIn) };
    const splits = rows.categories.filter(({ logged }) => logged.levels.length > 0).map(({ name, logged }, i) => {
      tell(`split by ${name}`, (0.5 * i) / rows.categories.length);
      return splitByCategory({ category: name, inDomain, logged, lengthsM: rows.lengthsM, holeStarts: rows.holeStarts, seed: SEED });
    });
    tell('orientation', 0.5);
    const inside = structures.filter(({ hole, depthM }) => mask[findRow(hole, depthM)] === 1);
    const populations = pay.flatMap((analyte, i) => {
      tell(`populations of ${analyte.variable}`, 0.6 + (0.4 * i) / pay.length);
      return populationParts(rows, mask, analyte, code);
    });
    const found = {
      domainId: id, domainVersion: version, ...extentOf(rows, mask), splits, structures: inside, orientations: orientationSets(inside), populations, grades: gradesOf(populations, pay, rows, mask),
      notes: inside.length === 0 && support === 'drill' ? ['No oriented structure lies inside this domain.'] : [],
    };
    return { ...found, finding: evidenceFinding(found) };
  });
  return { snapshotId, evidence };
});

function extentOf(rows: DomainRows, mask: Uint8Array): Pick<DomainEvidence, 'intervals' | 'metres' | 'holes' | 'runs' | 'meanRunM' | 'meanMembership'> {
  let [intervals, metres, membership] = [0, 0, 0];
  mask.forEach((isIn, row) => {
    if (isIn === 0) return;
    intervals += 1;
    metres += rows.lengthsM[row] ?? 0;
    membership += rows.membership[row] ?? 0;
  });
  const down = rows.holeStarts ? runsOf(rows, mask) : { holes: 0, runs: 0, meanRunM: 0 };
  return { intervals, metres, ...down, meanMembership: intervals > 0 ? membership / intervals : 0 };
}
