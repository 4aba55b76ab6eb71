import { z } from 'zod';
import { COMMAND_IDS, type CommandId } from './commands';
import { ariaKeyShortcuts, keyLabel } from './key-of-event';
import { DEFAULT_CHOICES, keysOf, type KeyChoices } from './resolve-key';

const STORED_UNDER = 'farglow-keys';
const schema = z.object({ charactersOff: z.boolean(), remapped: z.record(z.string(), z.string()) });

/** Reads stored choices; what is not understood (a command that is gone, a damaged text) falls back to the table. */
export function parseChoices(text: string | null): KeyChoices {
  try {
    const { charactersOff, remapped } = schema.parse(JSON.parse(text ?? ''));
    const known = Object.entries(remapped).filter(([id]) => (COMMAND_IDS as string[]).includes(id));
    return { charactersOff, remapped: Object.fromEntries(known) as KeyChoices['remapped'] };
  } catch {
    return DEFAULT_CHOICES;
  }
}

/** This browser's key choices, shared by every button and binding of the page. */
class KeyChoiceStore {
  choices = $state.raw<KeyChoices>(DEFAULT_CHOICES);

  /** Called once the page runs in a browser; until then the table's own keys are shown. */
  load(): void {
    this.choices = parseChoices(localStorage.getItem(STORED_UNDER));
  }

  change(choices: KeyChoices): void {
    this.choices = choices;
    localStorage.setItem(STORED_UNDER, JSON.stringify(choices));
  }

  /** What a button shows, or null where the command has no key at present. */
  label(id: CommandId): string | null {
    const [key] = keysOf(id, this.choices);
    return key === undefined ? null : keyLabel(key);
  }

  aria(id: CommandId): string | undefined {
    return ariaKeyShortcuts(keysOf(id, this.choices));
  }
}

export const keyChoices = new KeyChoiceStore();
