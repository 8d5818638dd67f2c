import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { PayAnalyte } from '#contract/deposits.ts';
import { ALL_ANALYTES, FOUR_ACID_ANALYTES } from '#seeds/demo/analytes.ts';
import { DEMO_SEED, makeDemoDeposit } from '#seeds/demo/demo-deposit.ts';
import type { DemoDeposit } from '#seeds/demo/demo-deposit.ts';
import { median, readAssays, readFile } from './read-demo.ts';
import type { AssayRow } from './read-demo.ts';

const deposit = makeDemoDeposit();
const assays = readAssays(deposit);
const key = ({ hole, fromM, toM }: { hole: string; fromM: number; toM: number }): string =>
  `${hole} ${fromM} ${toM}`;
const byKey = new Map(assays.map((row) => [key(row), row]));
const spoiltLines = new Set(
  deposit.plantedProblems.map(({ fileName, line }) => `${fileName} ${line}`),
);
const isSpoilt = ({ campaign, line }: AssayRow): boolean =>
  spoiltLines.has(`assays_campaign_${campaign}.csv ${line}`);
const goodRows = assays.filter((row) => row.ppm.size > 0 && !isSpoilt(row));

const digest = ({ files, truth }: DemoDeposit): string =>
  createHash('sha256')
    .update(JSON.stringify([files, truth]))
    .digest('hex');

const gradesOf = (
  analyte: string,
  where: { domain?: string; block?: string; group?: string },
): number[] =>
  deposit.truth
    .filter((row) => !where.domain || row.domain === where.domain)
    .filter((row) => !where.block || row.block === where.block)
    .filter((row) => !where.group || row.group === where.group)
    .map((row) => byKey.get(key(row))?.ppm.get(analyte) ?? NaN);

describe('size and shape', () => {
  const collars = readFile(deposit, 'collar.csv');
  const survey = readFile(deposit, 'survey.csv');

  it('has at least 64 holes of 180 to 360 m and 8,500 assay intervals', () => {
    expect(collars.rows.length).toBeGreaterThanOrEqual(64);
    for (const row of collars.rows) {
      expect(Number(row[4])).toBeGreaterThanOrEqual(180);
      expect(Number(row[4])).toBeLessThanOrEqual(360);
    }
    expect(goodRows.length).toBeGreaterThanOrEqual(8500);
  });

  it('surveys each hole every 30 m, and every hole bends', () => {
    for (const [hole, , , , length] of collars.rows) {
      const stations = survey.rows.filter((row) => row[0] === hole && Number(row[2]) < 360);
      expect(stations.map((row) => Number(row[1]))).toEqual(stations.map((_, i) => 30 * i));
      expect(stations).toHaveLength(Math.floor(Number(length) / 30) + 1);
      expect(new Set(stations.map((row) => row[2])).size).toBeGreaterThan(1);
      expect(new Set(stations.map((row) => row[3])).size).toBeGreaterThan(1);
    }
  });

  it('assays 48 elements by four acids, and gold and mercury by methods of their own', () => {
    expect(FOUR_ACID_ANALYTES).toHaveLength(48);
    for (const campaign of [1, 2] as const) {
      const row = assays.find((one) => one.campaign === campaign);
      const routine = [...(row?.text.keys() ?? [])].filter((name) => !name.includes('OG'));
      expect(routine.sort()).toEqual([...ALL_ANALYTES].sort());
    }
  });

  it('names pay analytes as the contract wants them and a suite that is assayed', () => {
    for (const pay of deposit.payAnalytes) expect(PayAnalyte.safeParse(pay).success).toBe(true);
    expect(ALL_ANALYTES).toEqual(expect.arrayContaining(deposit.suiteAnalytes));
    expect(ALL_ANALYTES).toEqual(expect.arrayContaining(deposit.deleteriousAnalytes));
  });
});

describe('determinism', () => {
  it('gives the same bytes for the same seed and others for another', () => {
    expect(digest(makeDemoDeposit(DEMO_SEED))).toBe(digest(deposit));
    expect(digest(makeDemoDeposit(DEMO_SEED + 1))).not.toBe(digest(deposit));
  });
});

describe('truth', () => {
  it('covers each good assay interval exactly once and nothing else', () => {
    const truthKeys = deposit.truth.map(key);
    expect(new Set(truthKeys).size).toBe(truthKeys.length);
    expect([...truthKeys].sort()).toEqual(goodRows.map(key).sort());
  });

  it('knows six domains on both sides of the late fault', () => {
    const found = new Set(deposit.truth.map(({ domain, block }) => `${domain} ${block}`));
    const expected = ['HW', 'FW', 'DYK', 'CST', 'ZMS', 'CMS'].flatMap((domain) => [
      `${domain} north`,
      `${domain} south`,
    ]);
    expect([...found].sort()).toEqual(expected.sort());
  });
});

describe('planted problems', () => {
  const lengths = new Map(
    readFile(deposit, 'collar.csv').rows.map((row) => [row[0], Number(row[4])]),
  );
  const cellsOf = (kind: string): string[] => {
    const problem = deposit.plantedProblems.find((one) => one.kind === kind);
    return readFile(deposit, problem?.fileName ?? '').rows[(problem?.line ?? 0) - 2] ?? [];
  };

  it('stand on the lines they are said to stand on', () => {
    const [deepHole, , deepTo] = cellsOf('past-end-of-hole');
    expect(Number(deepTo) - (lengths.get(deepHole ?? '') ?? 0)).toBeCloseTo(0.4, 6);
    expect(cellsOf('unknown-hole')[0]).toMatch(/^VAR-O\d\d$/);
    expect(cellsOf('text-in-number')).toContain('see note');
    const overlap = deposit.plantedProblems.find((one) => one.kind === 'overlap');
    const above = readFile(deposit, overlap?.fileName ?? '').rows[(overlap?.line ?? 0) - 3] ?? [];
    expect(cellsOf('overlap')[0]).toBe(above[0]);
    expect(Number(above[2]) - Number(cellsOf('overlap')[1])).toBeCloseTo(0.5, 6);
    expect(Number(cellsOf('azimuth-out-of-range')[2])).toBeGreaterThan(360);
    const [, logFrom, logTo] = cellsOf('inverted-interval');
    expect(Number(logTo)).toBeLessThan(Number(logFrom));
  });

  it('are the only rows at odds with the collars, the row above or the number format', () => {
    const odd = assays.filter((row, i) => {
      const above = assays[i - 1];
      const pastEnd = !(row.toM <= (lengths.get(row.hole) ?? -1) + 1e-9);
      const overlaps = above?.hole === row.hole && row.fromM < above.toM - 1e-9;
      const words = [...row.text.values()].some((text) => !/^(|NS|[<>-]?\d+(\.\d+)?)$/.test(text));
      return pastEnd || overlaps || words;
    });
    const planted = deposit.plantedProblems.filter(({ interval }) => interval);
    expect(odd.map((row) => `assays_campaign_${row.campaign}.csv ${row.line}`).sort()).toEqual(
      planted.map(({ fileName, line }) => `${fileName} ${line}`).sort(),
    );
  });
});

describe('laboratory notation', () => {
  it('writes below-limit cells as < in the older campaign and as negatives in the newer', () => {
    const texts = (campaign: 1 | 2): string[] =>
      goodRows.filter((row) => row.campaign === campaign).flatMap((row) => [...row.text.values()]);
    expect(texts(1).filter((text) => text.startsWith('<')).length).toBeGreaterThan(1000);
    expect(texts(1).some((text) => text.startsWith('-'))).toBe(false);
    expect(texts(2).filter((text) => text.startsWith('-')).length).toBeGreaterThan(1000);
    expect(texts(2).some((text) => /^[<>]/.test(text))).toBe(false);
  });

  it('fills the ore-grade column where the routine one is over range, and only there', () => {
    const wrong: string[] = [];
    let capped = 0;
    for (const row of goodRows.filter(({ campaign }) => campaign === 1)) {
      for (const analyte of ['Cu', 'Zn', 'Pb']) {
        const over = row.text.get(analyte) === '>10000';
        if ((row.text.get(`${analyte} OG`) !== '') !== over) wrong.push(`${row.line} ${analyte}`);
        if (over) capped += 1;
      }
    }
    expect(wrong).toEqual([]);
    expect(capped).toBeGreaterThan(300);
  });

  it('has worse limits in the older campaign: ten times for tellurium', () => {
    const limits = (campaign: 1 | 2): Set<string> =>
      new Set(
        goodRows
          .filter((row) => row.campaign === campaign)
          .map((row) => row.text.get('Te') ?? '')
          .filter((text) => /^[<-]/.test(text)),
      );
    expect([...limits(1)]).toEqual(['<0.5']);
    expect([...limits(2)]).toEqual(['-0.05']);
  });
});

describe('stoichiometry', () => {
  // Oxide factors: IUPAC 2021 atomic weights. Iron, sulphur and the ore metals are counted as
  // elements, since most of them sit in sulphides here.
  const OXIDE = {
    Al: 1.8894,
    Ca: 1.3992,
    K: 1.2046,
    Mg: 1.6583,
    Mn: 1.2912,
    Na: 1.348,
    P: 2.2913,
    Ti: 1.6685,
  };

  it('never reports more than 102 % of a rock', () => {
    const percents = goodRows.map(({ ppm }) => {
      let total = 0;
      for (const [analyte, value] of ppm) {
        total += value * (OXIDE[analyte as keyof typeof OXIDE] ?? 1);
      }
      return total / 1e4;
    });
    expect(Math.max(...percents)).toBeLessThanOrEqual(102);
    expect(median(percents)).toBeGreaterThan(15);
  });

  it('keeps each element under the purest mineral that could carry it', () => {
    const highest = (analyte: string): number =>
      Math.max(...goodRows.map(({ ppm }) => ppm.get(analyte) ?? NaN));
    // Wüstite, pyrite, sphalerite and chalcopyrite.
    expect(highest('Fe')).toBeLessThan(777_000);
    expect(highest('S')).toBeLessThan(534_500);
    expect(highest('Zn')).toBeLessThan(671_000);
    expect(highest('Cu')).toBeLessThan(346_300);
  });

  it('keeps Ti/Zr through sericite alteration, and apart from that of andesite', () => {
    const ratio = (group: string): number =>
      median(gradesOf('Ti', { group })) / median(gradesOf('Zr', { group }));
    expect(ratio('sericitic rhyodacite') / ratio('rhyodacite')).toBeCloseTo(1, 1);
    expect(ratio('andesite') / ratio('rhyodacite')).toBeGreaterThan(2);
  });
});

describe('the story in the ground', () => {
  it('has stringer copper several times richer south of the late fault', () => {
    const south = median(gradesOf('Cu', { domain: 'CST', block: 'south' }));
    const north = median(gradesOf('Cu', { domain: 'CST', block: 'north' }));
    expect(south / north).toBeGreaterThan(4);
  });

  it('has a zinc-rich top and a copper-rich base to the lens', () => {
    expect(
      median(gradesOf('Zn', { domain: 'ZMS' })) / median(gradesOf('Zn', { domain: 'CMS' })),
    ).toBeGreaterThan(8);
    expect(
      median(gradesOf('Cu', { domain: 'CMS' })) / median(gradesOf('Cu', { domain: 'ZMS' })),
    ).toBeGreaterThan(5);
  });

  it('has an arsenic halo in barren wall rock, not only in ore', () => {
    const wall = gradesOf('As', { group: 'andesite' });
    const background = median(wall);
    const high = wall.filter((ppm) => ppm > 10 * background);
    expect(high.length).toBeGreaterThan(20);
    expect(high.length).toBeLessThan(0.2 * wall.length);
  });

  it('has magnesium, chromium and nickel high in the dykes', () => {
    for (const analyte of ['Mg', 'Cr', 'Ni', 'Ti']) {
      expect(median(gradesOf(analyte, { domain: 'DYK' }))).toBeGreaterThan(
        median(gradesOf(analyte, { domain: 'HW' })),
      );
    }
  });

  it('leaches sulphur and sodium in the oxide zone', () => {
    const of = (weathering: string, analyte: string): number =>
      median(
        deposit.truth
          .filter((row) => row.group === 'andesite' && row.weathering === weathering)
          .map((row) => byKey.get(key(row))?.ppm.get(analyte) ?? NaN),
      );
    for (const analyte of ['S', 'Na', 'Ca', 'Zn']) {
      expect(of('oxide', analyte)).toBeLessThan(0.75 * of('fresh', analyte));
    }
  });
});

describe('logs', () => {
  it.each(['lithology.csv', 'weathering.csv'])(
    '%s covers every hole from top to end without gaps',
    (fileName) => {
      const planted = deposit.plantedProblems.find((one) => one.fileName === fileName);
      const rows = readFile(deposit, fileName).rows.filter((_, i) => i + 2 !== planted?.line);
      for (const [hole, , , , length] of readFile(deposit, 'collar.csv').rows) {
        const log = rows.filter((row) => row[0] === hole);
        expect(log[0]?.[1]).toBe('0.0');
        expect(log.at(-1)?.[2]).toBe(length);
        log.forEach((row, i) => {
          expect(Number(row[2])).toBeGreaterThan(Number(row[1]));
          if (i > 0) expect(row[1]).toBe(log[i - 1]?.[2]);
        });
      }
    },
  );

  it('spells one rock several ways in the older campaign and one way in the newer', () => {
    const codes = (campaign: string): Set<string | undefined> =>
      new Set(
        readFile(deposit, 'lithology.csv')
          .rows.filter((row) => row[4] === campaign)
          .map((row) => row[3]),
      );
    expect([...codes('1')]).toEqual(expect.arrayContaining(['AND', 'andesite', 'Andes']));
    expect([...codes('2')]).not.toContain('andesite');
    expect(codes('2').size).toBeLessThan(codes('1').size);
  });
});
