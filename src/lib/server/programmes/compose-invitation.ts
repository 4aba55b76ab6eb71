import { hashSecret, newSecret } from '../auth/secrets';
import { config } from '../config/config';
import { database } from '../database/connection';
import type { LetterRow } from '../database/queries/letters';
import { Invitation, Programme, User } from '../database/queries/people';
import type { Letter } from '../mail/deliver';

/**
 * Worker use-case. Writes the letter of an invitation; its secret is made here and only its hash stored, so a letter sent
 * again carries a new link and the one before opens nothing. Null where the invitation was used, taken back or has run out.
 */
export async function composeInvitation({ invitationId }: LetterRow): Promise<Letter | null> {
  database();
  const invitation = invitationId ? await Invitation.findByPk(invitationId) : null;
  if (!invitation?.email || invitation.usedAt || invitation.withdrawnAt || invitation.expiresAt < new Date())
    return null;
  const { email, programmeId, invitedBy, expiresAt } = invitation;
  const [programme, inviter] = await Promise.all([Programme.findByPk(programmeId!), User.findByPk(invitedBy!)]);
  if (!programme || !inviter) return null;
  const roles = typeof invitation.roles === 'string' ? JSON.parse(invitation.roles) : (invitation.roles ?? []);
  const secret = newSecret('fgi');
  await invitation.update({ tokenHash: hashSecret(secret) });
  const lines = [
    `${inviter.name} invites you to the programme "${programme.name}" (${programme.slug}) as ${roles.join(', ')}.`,
    '',
    'To accept, with a new account or one you have:',
    `${config().ORIGIN}/welcome/${secret}`,
    '',
    `The link works once, until ${expiresAt.toISOString().slice(0, 10)}. If you expect no such letter, leave it: nothing happens.`,
    '',
    'Farglow, redshifts for a night’s spectra',
  ];
  return { to: email, subject: `Invitation to ${programme.name}`, text: lines.join('\n') };
}
