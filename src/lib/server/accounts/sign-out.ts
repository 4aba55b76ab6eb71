import { endSession, type SessionCookie } from '../auth/sessions';

/** Public use-case: whoever holds a session may end it. */
export function signOut(sessionId: string): Promise<SessionCookie> {
  return endSession(sessionId);
}
