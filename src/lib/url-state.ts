import { useCallback, useMemo } from 'react';
import { useSearchParams } from 'react-router-dom';

/** How one value is read from and written to the address. `format` gives null for the default. */
export interface UrlField<Value> {
  parse(text: string | null): Value;
  format(value: Value): string | null;
}

type UrlFields = Record<string, UrlField<unknown>>;
export type UrlValues<Fields> = {
  [Key in keyof Fields]: Fields[Key] extends UrlField<infer Value> ? Value : never;
};

export const urlText = (fallback = ''): UrlField<string> => ({
  parse: (text) => text ?? fallback,
  format: (value) => (value === fallback ? null : value),
});

export const urlNumber = (fallback: number): UrlField<number> => ({
  parse: (text) => finiteOr(text, fallback),
  format: (value) => (Object.is(value, fallback) || !Number.isFinite(value) ? null : String(value)),
});

/** A number that may be absent: a limit not set, a hole not chosen. */
export const urlMaybeNumber = (): UrlField<number | null> => ({
  parse: (text) => finiteOr(text, null),
  format: (value) => (value === null || !Number.isFinite(value) ? null : String(value)),
});

export const urlFlag = (fallback = false): UrlField<boolean> => ({
  parse: (text) => (text === '1' ? true : text === '0' ? false : fallback),
  format: (value) => (value === fallback ? null : value ? '1' : '0'),
});

export const urlOneOf = <const Choice extends string>(
  choices: readonly Choice[],
  fallback: Choice,
): UrlField<Choice> => ({
  parse: (text) => choices.find((choice) => choice === text) ?? fallback,
  format: (value) => (value === fallback ? null : value),
});

/** A list of texts; commas and percent signs inside one are escaped. */
export const urlList = (): UrlField<readonly string[]> => ({
  parse: (text) => (text === null || text === '' ? [] : text.split(',').map(unescapeItem)),
  format: (value) => (value.length === 0 ? null : value.map(escapeItem).join(',')),
});

export const urlNumbers = (): UrlField<readonly number[]> => ({
  parse: (text) =>
    (text ?? '')
      .split(',')
      .filter((item) => item !== '')
      .map(Number)
      .filter(Number.isFinite),
  format: (value) => (value.length === 0 ? null : value.map(String).join(',')),
});

function finiteOr<Fallback>(text: string | null, fallback: Fallback): number | Fallback {
  if (text === null || text.trim() === '') return fallback;
  const value = Number(text);
  return Number.isFinite(value) ? value : fallback;
}

/** An empty item gets a mark of its own, or a list of one empty text would read as no list. */
const escapeItem = (item: string): string =>
  item === '' ? '%' : item.replaceAll('%', '%25').replaceAll(',', '%2C');
const unescapeItem = (item: string): string =>
  item === '%' ? '' : item.replaceAll('%2C', ',').replaceAll('%25', '%');

/** Reads every field; what the address lacks or garbles is its default. */
export function parseUrl<Fields extends UrlFields>(
  fields: Fields,
  search: URLSearchParams,
): UrlValues<Fields>;
export function parseUrl(fields: UrlFields, search: URLSearchParams): Record<string, unknown> {
  const values: Record<string, unknown> = {};
  for (const [name, field] of Object.entries(fields)) values[name] = field.parse(search.get(name));
  return values;
}

/** The address with some fields changed; others, also those of other owners, stay. */
export function formatUrl<Fields extends UrlFields>(
  fields: Fields,
  search: URLSearchParams,
  changes: Partial<UrlValues<Fields>>,
): URLSearchParams;
export function formatUrl(
  fields: UrlFields,
  search: URLSearchParams,
  changes: Record<string, unknown>,
): URLSearchParams {
  const next = new URLSearchParams(search);
  for (const [name, value] of Object.entries(changes)) {
    const field = fields[name];
    if (!field || value === undefined) continue;
    const text = field.format(value);
    if (text === null) next.delete(name);
    else next.set(name, text);
  }
  return next;
}

interface SetOptions {
  /** Push an entry (a step one may go back to) instead of replacing the present one. */
  push?: boolean;
}

/**
 * View state that lives in the address, so that a link reproduces the view.
 *
 * @param fields Declare it outside the component: it must be the same object at every render.
 */
export function useUrlState<Fields extends UrlFields>(
  fields: Fields,
): [UrlValues<Fields>, (changes: Partial<UrlValues<Fields>>, options?: SetOptions) => void] {
  const [search, setSearch] = useSearchParams();
  const values = useMemo(() => parseUrl(fields, search), [fields, search]);
  const change = useCallback(
    (changes: Partial<UrlValues<Fields>>, { push = false }: SetOptions = {}) =>
      setSearch((current) => formatUrl(fields, current, changes), {
        replace: !push,
        preventScrollReset: true,
      }),
    [fields, setSearch],
  );
  return [values, change];
}
