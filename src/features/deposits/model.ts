import type { Deposit, DepositBodyInput, GradeUnit } from '#contract/deposits.ts';

/** The form's own shape: the grid in separate fields, harmful elements as one line of text. */
export interface DepositForm {
  name: string;
  description: string;
  gridKind: 'epsg' | 'local';
  epsgCode: string;
  gridName: string;
  payAnalytes: { analyte: string; unit: GradeUnit }[];
  deleterious: string;
}

export const NEW_DEPOSIT: DepositForm = {
  name: '',
  description: '',
  gridKind: 'local',
  epsgCode: '',
  gridName: 'local grid',
  payAnalytes: [{ analyte: 'Cu', unit: '%' }],
  deleterious: 'As, Sb, Bi',
};

export const splitAnalytes = (text: string): string[] => text.split(/[\s,;]+/).filter(Boolean);

/** What the server is sent; the contract's schema judges it. */
export function bodyOf(form: DepositForm): DepositBodyInput {
  const { name, description, gridKind, epsgCode, gridName, payAnalytes, deleterious } = form;
  return {
    name,
    description,
    grid:
      gridKind === 'epsg'
        ? { kind: 'epsg', code: Number(epsgCode) }
        : { kind: 'local', name: gridName },
    payAnalytes,
    deleteriousAnalytes: splitAnalytes(deleterious),
  };
}

export function formOf(deposit: Deposit): DepositForm {
  const { name, description, grid, payAnalytes, deleteriousAnalytes } = deposit;
  return {
    name,
    description,
    gridKind: grid.kind,
    epsgCode: grid.kind === 'epsg' ? String(grid.code) : '',
    gridName: grid.kind === 'local' ? grid.name : 'local grid',
    payAnalytes: payAnalytes.map(({ analyte, unit }) => ({ analyte, unit })),
    deleterious: deleteriousAnalytes.join(', '),
  };
}

/** From the contract's path of a refused value to the form's field. */
export function fieldOf(path: readonly PropertyKey[]): string {
  const [head, ...rest] = path.map(String);
  if (head === 'grid') return rest[0] === 'code' ? 'epsgCode' : 'gridName';
  if (head === 'deleteriousAnalytes') return 'deleterious';
  return [head, ...rest].join('.');
}

const MESSAGES: Record<string, string> = {
  name: 'Expected a name of 1 to 120 letters',
  epsgCode: 'Expected the EPSG code of a projected grid in metres, 1024 to 32767',
  gridName: 'Expected a name for the grid',
};

export const messageFor = (field: string, message: string): string => MESSAGES[field] ?? message;

export const gridWords = (grid: Deposit['grid']): string =>
  grid.kind === 'epsg' ? `EPSG ${grid.code}` : grid.name;
