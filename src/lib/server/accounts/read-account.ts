import { hashSecret } from '../auth/secrets';
import { SCOPES, type Actor } from '../auth/permissions';
import { permitSelf } from '../auth/permit-self';
import { sessionsOf, tokensOf, wantsMentionLetters } from '../database/queries/account';

export interface Account {
  name: string;
  email: string;
  isAdmin: boolean;
  sessions: { id: string; startedAt: string; expiresAt: string; isThis: boolean }[];
  tokens: {
    id: string;
    name: string;
    scope: string;
    createdAt: string;
    expiresAt: string | null;
    hasRunOut: boolean;
  }[];
  scopes: readonly string[];
  /** They get a daily letter about mentions. */
  mentionLetters: boolean;
}

/** The person's own account: profile, open sessions, bearer tokens (their hashes only are kept, so none is shown). */
export async function readAccount(actor: Actor | null, sessionId: string | null): Promise<Account> {
  const { userId, name, email, isAdmin } = permitSelf(actor);
  const [sessions, tokens, mentionLetters] = await Promise.all([
    sessionsOf(userId),
    tokensOf(userId),
    wantsMentionLetters(userId),
  ]);
  const here = sessionId && hashSecret(sessionId);
  const now = new Date();
  return {
    name,
    email,
    isAdmin,
    sessions: sessions.map(({ id, startedAt, expiresAt }) => ({
      id,
      startedAt: startedAt.toISOString(),
      expiresAt: expiresAt.toISOString(),
      isThis: id === here,
    })),
    tokens: tokens.map((token) => ({
      id: token.id,
      name: token.name,
      scope: token.scope,
      createdAt: token.createdAt.toISOString(),
      expiresAt: token.expiresAt?.toISOString() ?? null,
      hasRunOut: token.expiresAt !== null && token.expiresAt < now,
    })),
    scopes: SCOPES,
    mentionLetters,
  };
}
