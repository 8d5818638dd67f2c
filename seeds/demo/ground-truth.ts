import type { RockUnit, Setting } from './geology-model.ts';

/** Domain that an interval of each rock body belongs to. */
const DOMAIN_OF_UNIT: Record<RockUnit, string> = {
  cover: 'HW',
  andesite: 'HW',
  mudstone: 'HW',
  'zinc sulphide': 'ZMS',
  'copper sulphide': 'CMS',
  'chlorite stringer': 'CST',
  'sericitic rhyodacite': 'FW',
  rhyodacite: 'FW',
  dolerite: 'DYK',
};

/** What one interval really is, known because the scenario is made up. */
export interface TruthRow {
  hole: string;
  fromM: number;
  toM: number;
  /** HW, FW, DYK, CST, ZMS or CMS. */
  domain: string;
  /** The rock body. */
  group: string;
  /** Side of the late fault. */
  block: string;
  weathering: string;
}

export function truthOf(hole: string, fromM: number, toM: number, main: Setting): TruthRow {
  const { unit, block, weathering } = main;
  return { hole, fromM, toM, domain: DOMAIN_OF_UNIT[unit], group: unit, block, weathering };
}
