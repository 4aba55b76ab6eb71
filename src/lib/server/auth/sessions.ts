import { Lucia, TimeSpan, type Adapter } from 'lucia';
import { config } from '../config/config';
import { database } from '../database/connection';
import { deleteExpiredSessions, Session, User } from '../database/queries/people';
import { hashSecret } from './secrets';

// Only the hash of a session id is stored: a stolen table opens no session.
const adapter: Adapter = {
  async getSessionAndUser(id) {
    database();
    const session = await Session.findByPk(hashSecret(id));
    const user = session && (await User.findByPk(session.userId));
    if (!session || !user) return [null, null];
    return [
      { id, userId: user.id, expiresAt: session.expiresAt, attributes: {} },
      { id: user.id, attributes: {} },
    ];
  },
  async getUserSessions(userId) {
    const sessions = await Session.findAll({ where: { userId } });
    return sessions.map(({ id, expiresAt }) => ({ id, userId, expiresAt, attributes: {} }));
  },
  async setSession({ id, userId, expiresAt }) {
    await Session.create({ id: hashSecret(id), userId, expiresAt });
  },
  async updateSessionExpiration(id, expiresAt) {
    await Session.update({ expiresAt }, { where: { id: hashSecret(id) } });
  },
  async deleteSession(id) {
    await Session.destroy({ where: { id: hashSecret(id) } });
  },
  async deleteUserSessions(userId) {
    await Session.destroy({ where: { userId } });
  },
  deleteExpiredSessions,
};

let lucia: Lucia | undefined;

function sessions(): Lucia {
  if (!lucia) {
    // Cookies ignore ports, so the name carries it: two installations on one host keep apart.
    const { port } = new URL(config().ORIGIN);
    lucia = new Lucia(adapter, {
      sessionExpiresIn: new TimeSpan(14, 'd'),
      sessionCookie: {
        name: `__Host-farglow${port && `-${port}`}`,
        attributes: { sameSite: 'lax', secure: true, path: '/' },
      },
    });
  }
  return lucia;
}

export interface SessionCookie {
  name: string;
  value: string;
  options: { path: string; httpOnly: boolean; secure: boolean; sameSite: 'lax'; maxAge?: number };
}

const asCookie = (cookie: { name: string; value: string; attributes: { maxAge?: number } }): SessionCookie => ({
  name: cookie.name,
  value: cookie.value,
  options: { path: '/', httpOnly: true, secure: true, sameSite: 'lax', maxAge: cookie.attributes.maxAge },
});

export const sessionCookieName = (): string => sessions().sessionCookieName;

/** Starts a session with an id of its own and returns its cookie. */
export async function startSession(userId: string): Promise<SessionCookie> {
  database();
  const session = await sessions().createSession(userId, {});
  return asCookie(sessions().createSessionCookie(session.id));
}

/** The person of a session id, and the cookie to send again where its time was extended. */
export async function readSession(id: string): Promise<{ userId: string; renewed: SessionCookie | null } | null> {
  const { session } = await sessions().validateSession(id);
  if (!session) return null;
  const renewed = session.fresh ? asCookie(sessions().createSessionCookie(session.id)) : null;
  return { userId: session.userId, renewed };
}

/** Ends a session; returns the cookie that makes the browser forget it. */
export async function endSession(id: string): Promise<SessionCookie> {
  await sessions().invalidateSession(id);
  return asCookie(sessions().createBlankSessionCookie());
}
