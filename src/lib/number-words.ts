import { formatCount } from './format.ts';

const WORDS = ['no', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine', 'ten', 'eleven', 'twelve'];

/** A count in a sentence: in words up to twelve. */
export const inWords = (count: number): string => WORDS[count] ?? formatCount(count);

/** With a capital, to begin a sentence. */
export const asOpening = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

/** "Cu, Zn and Pb" */
export const listed = (words: readonly string[]): string =>
  words.length > 1 ? `${words.slice(0, -1).join(', ')} and ${words.at(-1)}` : (words[0] ?? '');
