import { useCallback } from 'react';
import type * as z from 'zod';
import { createStore, useStore } from './store.ts';

/**
 * Small choices kept in this browser for each person: theme, tray height, table columns. Nothing
 * secret goes here. The last person's choice is also kept without a name, for the sign-in page.
 */
const personStore = createStore<number | null>(null);
const changeStore = createStore(0);

export const setPreferencePerson = (userId: number | null): void => personStore.set(userId);

const keyOf = (person: number | null, name: string): string =>
  `selvage:${person ?? 'last'}:${name}`;

function readText(key: string): string | null {
  try {
    return localStorage.getItem(key);
  } catch {
    return null;
  }
}

function writeText(key: string, text: string): void {
  try {
    localStorage.setItem(key, text);
  } catch {
    // A browser that keeps nothing still works for the time the page is open.
  }
}

export function readPreference<Schema extends z.ZodType>(
  name: string,
  schema: Schema,
  fallback: z.output<Schema>,
): z.output<Schema> {
  const text = readText(keyOf(personStore.get(), name)) ?? readText(keyOf(null, name));
  if (text === null) return fallback;
  try {
    const parsed = schema.safeParse(JSON.parse(text));
    return parsed.success ? parsed.data : fallback;
  } catch {
    return fallback;
  }
}

export function writePreference(name: string, value: unknown): void {
  const text = JSON.stringify(value);
  writeText(keyOf(personStore.get(), name), text);
  writeText(keyOf(null, name), text);
  changeStore.set(changeStore.get() + 1);
}

export const onPreferenceChange = (listener: () => void): (() => void) => {
  const stopPerson = personStore.subscribe(listener);
  const stopChange = changeStore.subscribe(listener);
  return () => {
    stopPerson();
    stopChange();
  };
};

/** @param schema Declare it outside the component. */
export function usePreference<Schema extends z.ZodType>(
  name: string,
  schema: Schema,
  fallback: z.output<Schema>,
): [z.output<Schema>, (value: z.output<Schema>) => void] {
  useStore(personStore);
  useStore(changeStore);
  const write = useCallback((value: z.output<Schema>) => writePreference(name, value), [name]);
  return [readPreference(name, schema, fallback), write];
}
