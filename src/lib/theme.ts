import * as z from 'zod';
import { onPreferenceChange, readPreference, usePreference } from './preferences.ts';

export const Theme = z.enum(['light', 'dark', 'system']);
export type Theme = z.infer<typeof Theme>;

export const THEME_WORDS: Record<Theme, string> = {
  light: 'Light',
  dark: 'Dark',
  system: 'As the system',
};

/** With no attribute the tokens follow the system. */
function applyTheme(theme: Theme): void {
  if (theme === 'system') delete document.documentElement.dataset['theme'];
  else document.documentElement.dataset['theme'] = theme;
}

/** Applies the kept theme now and whenever it, or the person, changes. */
export function followTheme(): void {
  const apply = () => applyTheme(readPreference('theme', Theme, 'system'));
  apply();
  onPreferenceChange(apply);
}

export const useTheme = (): [Theme, (theme: Theme) => void] =>
  usePreference('theme', Theme, 'system');
