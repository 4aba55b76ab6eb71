import { COMMAND_IDS, COMMANDS, type CommandId, type Scope } from './commands';
import { isCharacterKey } from './key-of-event';

/** A person's own keys. */
export interface KeyChoices {
  /** Single characters do nothing; Enter and arrows still work. */
  charactersOff: boolean;
  /** Keys that replace those of the table, by command. */
  remapped: Partial<Record<CommandId, string>>;
}

export const DEFAULT_CHOICES: KeyChoices = { charactersOff: false, remapped: {} };

/** The keys of a command as this person has them. */
export function keysOf(id: CommandId, choices: KeyChoices): readonly string[] {
  const own = choices.remapped[id];
  const keys: readonly string[] = own === undefined ? COMMANDS[id].keys : [own];
  return choices.charactersOff ? keys.filter((key) => !isCharacterKey(key)) : keys;
}

/** The command that a key gives in a scope, or null. */
export function commandOfKey(key: string, scope: Scope, choices: KeyChoices): CommandId | null {
  const here = COMMAND_IDS.filter((id) => COMMANDS[id].scope === scope || COMMANDS[id].scope === 'everywhere');
  return foremost(
    here.filter((id) => keysOf(id, choices).includes(key)),
    choices,
  );
}

/** A person's own choice outlives a command that comes later with the same key of its own. */
function foremost(having: readonly CommandId[], choices: KeyChoices): CommandId | null {
  return having.find((id) => choices.remapped[id] !== undefined) ?? having[0] ?? null;
}

/** The command that already has a key, if any other has: two commands may not share one. */
export function conflictOf(id: CommandId, key: string, choices: KeyChoices): CommandId | null {
  const own = { ...choices, charactersOff: false };
  return foremost(
    COMMAND_IDS.filter((other) => other !== id && keysOf(other, own).includes(key)),
    own,
  );
}
