import { useSyncExternalStore } from 'react';

const DARK_QUERY = '(prefers-color-scheme: dark)';

function themeKey(): string {
  const chosen = document.documentElement.dataset['theme'] ?? 'system';
  const systemIsDark = typeof matchMedia === 'function' && matchMedia(DARK_QUERY).matches;
  return `${chosen}/${systemIsDark ? 'dark' : 'light'}`;
}

function subscribe(onChange: () => void): () => void {
  const observer = new MutationObserver(onChange);
  observer.observe(document.documentElement, { attributes: true, attributeFilter: ['data-theme'] });
  const query = typeof matchMedia === 'function' ? matchMedia(DARK_QUERY) : null;
  query?.addEventListener('change', onChange);
  return () => {
    observer.disconnect();
    query?.removeEventListener('change', onChange);
  };
}

/** A key that changes with the theme, so that a canvas knows when to paint again. */
export function useThemeKey(): string {
  return useSyncExternalStore(subscribe, themeKey, () => 'system/light');
}

/** The value of a design token now, for a canvas, which cannot read `var(--name)` itself. */
export function tokenValue(name: string): string {
  return getComputedStyle(document.documentElement).getPropertyValue(name).trim() || '#808080';
}

/** Replaces every `var(--name)` in a style text by the token's value now. */
export function resolveTokens(text: string): string {
  const once = text.replace(/var\((--[\w-]+)\)/g, (_match, name: string) => tokenValue(name));
  return once.includes('var(--') && once !== text ? resolveTokens(once) : once;
}
