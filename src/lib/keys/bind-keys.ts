import { COMMANDS, type CommandId, type Scope } from './commands';
import { keyOfEvent } from './key-of-event';
import { keyChoices } from './key-choices.svelte';
import { commandOfKey } from './resolve-key';
import { takesKey } from './takes-key';

export type KeyHandlers = Partial<Record<CommandId, () => void>>;

/**
 * An attachment that gives a page its keys while the element is on it: `{@attach bindKeys('review', { accept: … })}`.
 * A command without a handler leaves its key to the browser.
 */
export function bindKeys(scope: Scope, handlers: KeyHandlers) {
  return (): (() => void) => {
    keyChoices.load();
    function press(event: KeyboardEvent) {
      const key = keyOfEvent(event);
      if (
        key === null ||
        event.defaultPrevented ||
        takesKey(event.target instanceof Element ? event.target : null, key)
      )
        return;
      const command = commandOfKey(key, scope, keyChoices.choices);
      const handler = command && handlers[command];
      if (!handler) return;
      event.preventDefault();
      // A key held down may move and zoom on, but gives one verdict, not one to every spectrum of the queue.
      if (!event.repeat || COMMANDS[command].mayRepeat) handler();
    }
    document.addEventListener('keydown', press);
    return () => document.removeEventListener('keydown', press);
  };
}
