import { createSubscriber } from 'svelte/reactivity';

/** Paper and ink; deep neutral; red light only, for a dark dome. */
export const THEMES = ['light', 'dark', 'dome'] as const;
export type Theme = (typeof THEMES)[number];

/** The cookie the server reads to set `data-theme` before the first paint. */
export const THEME_COOKIE = 'farglow-theme';
const ONE_YEAR_SECONDS = 31_536_000;

/** Narrows a cookie's or a form's text to a theme; light where it is none. */
export function themeOf(text: string | null | undefined): Theme {
  return THEMES.find((theme) => theme === text) ?? 'light';
}

/** Puts a theme on the page and remembers it for a year. */
export function setTheme(theme: Theme): void {
  document.documentElement.dataset.theme = theme;
  document.cookie = `${THEME_COOKIE}=${theme}; path=/; max-age=${ONE_YEAR_SECONDS}; samesite=lax`;
}

const subscribe = createSubscriber((update) => {
  const observer = new MutationObserver(update);
  observer.observe(document.documentElement, { attributes: true, attributeFilter: ['data-theme'] });
  return () => observer.disconnect();
});

/** The theme on the page, reactive in the browser: canvases read their colours anew when it changes. */
export function currentTheme(): Theme {
  if (typeof document === 'undefined') return 'light';
  subscribe();
  return themeOf(document.documentElement.dataset.theme);
}
