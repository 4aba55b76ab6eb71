import { describe, expect, it } from 'vitest';
import { COMMAND_IDS, COMMANDS } from './commands';
import { parseChoices } from './key-choices.svelte';
import { ariaKeyShortcuts, isCharacterKey, keyLabel, keyOfEvent } from './key-of-event';
import { commandOfKey, conflictOf, DEFAULT_CHOICES, keysOf } from './resolve-key';

const press = (key: string, more = {}) =>
  keyOfEvent({ key, ctrlKey: false, altKey: false, metaKey: false, shiftKey: false, ...more });

describe('COMMANDS', () => {
  it('gives no key to two commands', () => {
    const keys = COMMAND_IDS.flatMap((id) => [...COMMANDS[id].keys]);
    expect(new Set(keys).size).toBe(keys.length);
  });
  it('lets no key that decides repeat while it is held down', () => {
    const repeating = COMMAND_IDS.filter((id) => COMMANDS[id].mayRepeat);
    expect(repeating).toEqual([
      'left',
      'right',
      'farLeft',
      'farRight',
      'zoomIn',
      'zoomOut',
      'fluxTaller',
      'fluxFlatter',
    ]);
  });
  it('has a confidence key for each of the four words', () => {
    expect((['secure', 'probable', 'ambiguous', 'none'] as const).map((word) => COMMANDS[word].keys[0])).toEqual([
      's',
      'p',
      'a',
      'n',
    ]);
  });
});

describe('keyOfEvent', () => {
  it('leaves keys with a modifier to the browser', () => {
    expect([
      press('s', { ctrlKey: true }),
      press('ArrowLeft', { altKey: true }),
      press('a', { metaKey: true }),
    ]).toEqual([null, null, null]);
  });
  it('names Shift with arrows, not with characters', () => {
    expect([
      press('ArrowLeft', { shiftKey: true }),
      press('?', { shiftKey: true }),
      press('S', { shiftKey: true }),
    ]).toEqual(['Shift+ArrowLeft', '?', 's']);
  });
  it('takes neither Tab nor Space nor Escape', () => {
    expect([press('Tab'), press(' '), press('Escape'), press('F5')]).toEqual([null, null, null, null]);
  });
});

describe('labels', () => {
  it('prints keys for people and for aria-keyshortcuts', () => {
    expect(['s', 'Shift+ArrowLeft', '+', '-', 'Enter'].map(keyLabel)).toEqual([
      'S',
      'Shift Left',
      '+',
      '\u2212',
      'Enter',
    ]);
    expect(ariaKeyShortcuts(['+', '='])).toBe('Plus =');
    expect(ariaKeyShortcuts([])).toBeUndefined();
  });
});

describe('commandOfKey', () => {
  it('finds commands of the scope and those that work everywhere', () => {
    expect(commandOfKey('s', 'review', DEFAULT_CHOICES)).toBe('secure');
    expect(commandOfKey('s', 'everywhere', DEFAULT_CHOICES)).toBeNull();
    expect(commandOfKey('?', 'review', DEFAULT_CHOICES)).toBe('help');
  });
  it('leaves Enter and arrows when single keys are off (WCAG 2.2, 2.1.4)', () => {
    const off = { ...DEFAULT_CHOICES, charactersOff: true };
    expect(commandOfKey('s', 'review', off)).toBeNull();
    expect(commandOfKey('Enter', 'review', off)).toBe('accept');
    expect(COMMAND_IDS.flatMap((id) => keysOf(id, off)).some(isCharacterKey)).toBe(false);
  });
  it("follows a person's own keys, and frees the old ones", () => {
    const own = { charactersOff: false, remapped: { secure: 'w' } };
    expect([commandOfKey('w', 'review', own), commandOfKey('s', 'review', own)]).toEqual(['secure', null]);
    expect([conflictOf('probable', 'w', own), conflictOf('probable', 's', own)]).toEqual(['secure', null]);
  });
});

describe('parseChoices', () => {
  it('falls back to the table for damaged text and forgets commands that are gone', () => {
    expect(parseChoices('{')).toEqual(DEFAULT_CHOICES);
    expect(parseChoices(null)).toEqual(DEFAULT_CHOICES);
    expect(parseChoices('{"charactersOff":true,"remapped":{"secure":"w","gone":"q"}}')).toEqual({
      charactersOff: true,
      remapped: { secure: 'w' },
    });
  });
});
