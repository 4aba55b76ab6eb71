import type { Config } from 'tailwindcss';

// Names only: each value is the token of src/app.css, so that the three themes share every class.
const token = (names: string[]) => Object.fromEntries(names.map((name) => [name, `var(--${name})`]));
const numbered = (prefix: string, names: string[]) =>
  Object.fromEntries(names.map((name) => [name, `var(--${prefix}-${name})`]));
const size = (name: string) =>
  [`var(--text-${name})`, { lineHeight: `var(--lead-${name})` }] as [string, { lineHeight: string }];

export default {
  content: ['./src/**/*.{html,svelte,ts}'],
  theme: {
    colors: {
      transparent: 'transparent',
      current: 'currentColor',
      ...token(['paper', 'sheet', 'well', 'rule', 'rule-strong', 'ink', 'ink-quiet']),
      ...token(['accent', 'accent-ink', 'accent-wash', 'teal', 'violet', 'ochre', 'alarm', 'alarm-wash', 'focus']),
      ...token(['secure', 'probable', 'ambiguous', 'none', 'flux', 'envelope', 'error-line', 'sky', 'model']),
      ...token(['continuum', 'permitted', 'forbidden', 'telluric', 'skyline', 'grid']),
    },
    fontFamily: { sans: 'var(--font-sans)', mono: 'var(--font-mono)' },
    fontSize: Object.fromEntries(
      ['tick', 'dense', 'body', 'lead', 'head', 'title', 'display'].map((name) => [name, size(name)]),
    ),
    fontWeight: numbered('weight', ['normal', 'strong', 'heavy']),
    spacing: { 0: '0', px: '1px', ...numbered('space', ['1', '2', '3', '4', '5', '6', '7', '8']) },
    borderRadius: { none: '0', ...numbered('radius', ['s', 'm', 'pill']) },
    borderWidth: { DEFAULT: '1px', 0: '0', ...numbered('border', ['hair', 'rule', 'margin']) },
    boxShadow: { float: 'var(--shadow-float)', none: 'none' },
    extend: {
      transitionDuration: numbered('time', ['quick', 'settle']),
      minHeight: { target: 'var(--target)', touch: 'var(--touch)' },
      minWidth: { target: 'var(--target)', touch: 'var(--touch)' },
    },
  },
} satisfies Config;
