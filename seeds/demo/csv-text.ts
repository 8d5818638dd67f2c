import { stringify } from 'csv-stringify/sync';
import type { TextTable } from './assay-files.ts';

/** CSV text by RFC 4180 quoting, one line feed a row. */
export const csvText = ({ header, rows }: TextTable): string => stringify([header, ...rows]);
