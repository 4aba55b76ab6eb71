import { Refusal } from '$lib/domain/refusal';

export const ROLES = ['observer', 'scientist', 'curator', 'collaborator'] as const;
export type Role = (typeof ROLES)[number];

export const SCOPES = ['read', 'submit', 'review', 'publish'] as const;
export type Scope = (typeof SCOPES)[number];

/** Who may do what in a programme: the roles that may, and the scope a bearer token needs for it. */
const TABLE = {
  'night.create': { roles: ['observer'], scope: 'submit' },
  'night.submit': { roles: ['observer'], scope: 'submit' },
  'night.read': { roles: ['observer', 'scientist', 'curator'], scope: 'read' },
  'spectrum.read': { roles: ['observer', 'scientist', 'curator'], scope: 'read' },
  'spectrum.judge': { roles: ['scientist'], scope: 'review' },
  'spectrum.rule': { roles: ['scientist', 'curator'], scope: 'review' },
  'spectrum.assign': { roles: ['scientist', 'curator'], scope: 'review' },
  'spectrum.comment': { roles: ['observer', 'scientist', 'curator'], scope: 'review' },
  'instrument.read': { roles: ['observer', 'scientist', 'curator'], scope: 'read' },
  'instrument.save': { roles: ['observer', 'curator'], scope: 'submit' },
  'measurement.repeat': { roles: ['observer', 'curator'], scope: 'submit' },
  'measurement.compare': { roles: ['observer', 'scientist', 'curator'], scope: 'read' },
  'measurement.accept': { roles: ['scientist', 'curator'], scope: 'review' },
  'target.list': { roles: ['observer', 'curator'], scope: 'submit' },
  'target.combine': { roles: ['observer', 'scientist', 'curator'], scope: 'submit' },
  'review.read-statistics': { roles: ['scientist', 'curator'], scope: 'read' },
  'review.read-people': { roles: ['curator'], scope: 'read' },
  'review.set': { roles: ['curator'], scope: 'publish' },
  'catalogue.read-draft': { roles: ['curator'], scope: 'read' },
  'catalogue.draft': { roles: ['curator'], scope: 'publish' },
  'catalogue.freeze': { roles: ['curator'], scope: 'publish' },
  'programme.invite': { roles: ['curator'], scope: 'publish' },
  'programme.read': { roles: ['observer', 'scientist', 'curator', 'collaborator'], scope: 'read' },
} as const satisfies Record<string, { roles: readonly Role[]; scope: Scope }>;

export type Permission = keyof typeof TABLE;

/** Whoever asks: a person signed in by a session or a token. */
export interface Actor {
  userId: string;
  name: string;
  email: string;
  isAdmin: boolean;
  /** Roles by programme id. */
  roles: ReadonlyMap<string, ReadonlySet<Role>>;
  /** null for a session, which may all that its person may; else the token's scopes. */
  scopes: ReadonlySet<Scope> | null;
}

/** True if the actor may do this in the programme. */
export function may(actor: Actor | null, permission: Permission, programmeId: string): boolean {
  if (!actor) return false;
  const { roles, scope } = TABLE[permission];
  const held = actor.roles.get(programmeId);
  return !!held && roles.some((role) => held.has(role)) && (!actor.scopes || actor.scopes.has(scope));
}

/**
 * True if a role of the person's allows this, whatever their token's scopes. Blindness asks this: a token that may only
 * read does not make a scientist someone who gives no verdicts.
 */
export function mayByRole(actor: Actor, permission: Permission, programmeId: string): boolean {
  return may({ ...actor, scopes: null }, permission, programmeId);
}

/**
 * Refuses unless the actor may. Asked by every use-case.
 * Someone outside the programme learns that the thing is not found; a member with too little learns what is missing.
 */
export function permit(actor: Actor | null, permission: Permission, programmeId: string): Actor {
  if (!actor) throw new Refusal('not-signed-in', 'This needs a signed-in person or a bearer token.', 'Sign in first.');
  if (may(actor, permission, programmeId)) return actor;
  const held = actor.roles.get(programmeId);
  if (!held) throw new Refusal('not-found', 'There is no such thing, or it belongs to a programme you are not in.');
  const { roles, scope } = TABLE[permission];
  if (actor.scopes && !actor.scopes.has(scope)) {
    throw new Refusal('forbidden', `This token lacks the scope "${scope}".`, 'Make a token with that scope.');
  }
  throw new Refusal(
    'forbidden',
    `This needs the role ${roles.join(' or ')} in the programme.`,
    'Ask a curator for it.',
  );
}

/** Ids of the programmes in which the actor may do this. */
export function programmesWhere(actor: Actor | null, permission: Permission): string[] {
  if (!actor) throw new Refusal('not-signed-in', 'This needs a signed-in person or a bearer token.', 'Sign in first.');
  return [...actor.roles.keys()].filter((id) => may(actor, permission, id));
}
