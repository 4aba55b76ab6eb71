// WCAG 2.2 (W3C Recommendation, 2023), success criteria 1.4.3 and 1.4.11: text at least 4.5:1, data and controls 3:1;
// relative luminance and contrast ratio as defined in its glossary.
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';

const css = readFileSync(new URL('./tokens.css', import.meta.url), 'utf8');

function tokensOf(theme: string): Map<string, string> {
  const body = css.match(new RegExp(`\\[data-theme='${theme}'\\]\\s*{([^}]*)}`))?.[1] ?? '';
  return new Map([...body.matchAll(/--([\w-]+):\s*(#[0-9a-f]{6})/g)].map((match) => [match[1], match[2]]));
}

function luminance(hex: string): number {
  const [red, green, blue] = [1, 3, 5]
    .map((at) => parseInt(hex.slice(at, at + 2), 16) / 255)
    .map((value) => (value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ** 2.4));
  return 0.2126 * red + 0.7152 * green + 0.0722 * blue;
}

function contrast(a: string, b: string): number {
  const [dark, light] = [luminance(a), luminance(b)].sort((p, q) => p - q);
  return (light + 0.05) / (dark + 0.05);
}

const surfaces = ['paper', 'sheet', 'well'];
const pairs = (fronts: string[], backs: string[]) => fronts.flatMap((front) => backs.map((back) => [front, back]));
const words = ['ink', 'ink-quiet', 'accent', 'secure', 'probable', 'ambiguous', 'none', 'alarm'];
const text = [
  ...pairs([...words, 'teal', 'violet', 'ochre'], surfaces),
  ...pairs(words.slice(0, -1), ['accent-wash']),
  ...pairs(['ink', 'ink-quiet', 'alarm'], ['alarm-wash']),
  ...pairs(['ink', 'ink-quiet'], ['skyline']),
  ['accent-ink', 'accent'],
  ['paper', 'ink'],
];
const data = [
  ...pairs(['flux', 'error-line', 'sky', 'model', 'continuum', 'permitted', 'forbidden'], ['well', 'sheet', 'skyline']),
  ...pairs(['flux', 'model'], ['envelope']),
  ...pairs(['rule-strong', 'focus'], [...surfaces, 'accent-wash']),
];

describe.each(['light', 'dark', 'dome'])('tokens of %s', (theme) => {
  const tokens = tokensOf(theme);
  const ratio = ([front, back]: string[]) => contrast(tokens.get(front) ?? '', tokens.get(back) ?? '');

  it('gives every pair of text and ground at least 4.5:1', () => {
    expect(text.filter((pair) => !(ratio(pair) >= 4.5))).toEqual([]);
  });

  it('gives every data colour and control edge at least 3:1', () => {
    expect(data.filter((pair) => !(ratio(pair) >= 3))).toEqual([]);
  });
});

describe('dome', () => {
  it('emits red only: green and blue are 0 in every token', () => {
    const tokens = [...tokensOf('dome')];
    expect(tokens.length).toBeGreaterThan(30);
    expect(tokens.filter(([, value]) => value.slice(3) !== '0000')).toEqual([]);
  });
});

describe('luminance', () => {
  it('gives black on white the ratio 21, the greatest that WCAG 2.2 defines', () => {
    expect(contrast('#000000', '#ffffff')).toBeCloseTo(21, 10);
  });
});
