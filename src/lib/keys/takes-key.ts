/** Text is being written there: no single key is a command. */
const WRITING =
  'textarea, select, [contenteditable=""], [contenteditable="true"], input:not([type="radio"], [type="checkbox"], [type="button"], [type="submit"])';
const PRESSED = 'button, a[href], summary, [role="button"], [role="tab"], [role="menuitem"]';

/**
 * Whether the element that has the focus needs a key itself, so that no command may take it: everything while writing or
 * in an open dialog; Enter on buttons and links; arrows on radio buttons, which they move by the platform's own rule.
 */
export function takesKey(element: Element | null, key: string): boolean {
  if (!element) return false;
  if (element.closest('dialog[open]') || element.matches(WRITING)) return true;
  if (key === 'Enter') return element.closest(PRESSED) !== null;
  return key.includes('Arrow') && element.matches('input[type="radio"]');
}
