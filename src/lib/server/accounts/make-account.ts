import type { Role } from '../auth/permissions';
import { hashPassword } from '../auth/passwords';
import { recordEvent } from '../audit/record-event';
import { inTransaction } from '../database/in-transaction';
import { ProgrammeMember, User } from '../database/queries/people';

export interface NewAccount {
  name: string;
  email: string;
  password: string;
  programmeId: string;
  roles: Role[];
  isAdmin: boolean;
  isDemo: boolean;
}

/** Operator use-case, run on the machine itself: an account with roles in one programme. */
export async function makeAccount(account: NewAccount): Promise<{ userId: string }> {
  const passwordHash = await hashPassword(account.password);
  const { name, email, isAdmin, isDemo, programmeId, roles } = account;
  return inTransaction(async (transaction) => {
    const user = await User.create({ name, email, passwordHash, isAdmin, isDemo } as never, { transaction });
    const memberships = roles.map((role) => ({ programmeId, userId: user.id, role }));
    await ProgrammeMember.bulkCreate(memberships, { transaction });
    await recordEvent(
      { userId: user.id, action: 'account.make', subject: `user:${user.id}`, detail: { roles } },
      transaction,
    );
    return { userId: user.id };
  });
}
