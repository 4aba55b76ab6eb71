/** What of a keyboard event is needed; a KeyboardEvent has it. */
interface Pressed {
  key: string;
  ctrlKey: boolean;
  altKey: boolean;
  metaKey: boolean;
  shiftKey: boolean;
}

const NAMED = /^(?:Arrow(?:Left|Right|Up|Down)|Enter|Home|End|PageUp|PageDown)$/;

/**
 * The name of a key press: a single character in lower case (`s`, `?`, `+`), or `Enter`, `ArrowLeft`, `Shift+ArrowLeft`.
 * Null with Ctrl, Alt or Meta, which are the browser's, and for keys that no command may take (Tab, Escape, Space).
 */
export function keyOfEvent(event: Pressed): string | null {
  if (event.ctrlKey || event.altKey || event.metaKey) return null;
  if (NAMED.test(event.key)) return (event.shiftKey ? 'Shift+' : '') + event.key;
  // Shift is part of which character it is, so it is not named again.
  return [...event.key].length === 1 && event.key !== ' ' ? event.key.toLowerCase() : null;
}

/** A single printable character: what WCAG 2.2 criterion 2.1.4 wants to be switched off or remapped. */
export function isCharacterKey(key: string): boolean {
  return [...key].length === 1;
}

const SHOWN: Record<string, string> = {
  ArrowLeft: 'Left',
  ArrowRight: 'Right',
  ArrowUp: 'Up',
  ArrowDown: 'Down',
  '-': '\u2212',
};

/** A key as it is printed on a button: `S`, `Shift Left`, `?`. */
export function keyLabel(key: string): string {
  return key
    .split(/(?<=Shift)\+/)
    .map((part) => SHOWN[part] ?? (part.length === 1 ? part.toUpperCase() : part))
    .join(' ');
}

/** Keys as the attribute `aria-keyshortcuts` (WAI-ARIA 1.2) wants them: `Enter`, `Shift+ArrowLeft`, `Plus`. */
export function ariaKeyShortcuts(keys: readonly string[]): string | undefined {
  const names = keys.map((key) => (key === '+' ? 'Plus' : key.length === 1 ? key.toUpperCase() : key));
  return names.length ? names.join(' ') : undefined;
}
