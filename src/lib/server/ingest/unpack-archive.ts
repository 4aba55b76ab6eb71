import { InputProblem, type Problem } from '$lib/domain/problem';
import { Refusal } from '$lib/domain/refusal';
import { archiveKind, HEAD_BYTES } from '$lib/formats/archive/archive-kind';
import { MAX_MEMBERS, type ArchiveMember } from '$lib/formats/archive/member';
import { problemAt } from '$lib/formats/place';
import { inTransaction } from '../database/in-transaction';
import { findNight, touchNights } from '../database/queries/nights';
import { settleUnpacked, takeUnpacking, type UploadRow } from '../database/queries/uploads';
import { log } from '../log/log';
import { nudge } from '../queue/nudge';
import { fulfil } from '../queue/outbox';
import { staging } from '../storage/staging';
import { archiveMembers } from './archive-members';
import { peekBytes } from './peek-bytes';
import { addToNight, storeBytes, type NightAdmitted, type StoredBytes } from './receive-file';

const TRIES = 3;
/** Members whose rows are written together. */
const MEMBERS_PER_TRANSACTION = 32;
/** Refused members told one by one; the rest as a number. */
const PROBLEMS_TOLD = 200;
/** Of a refused member's name, characters that are told: its length is what may be wrong with it. */
const MOST_OF_NAME = 300;
/** An archive with more bombs than this is one itself: each costs the unpacking of some megabytes. */
const BOMBS = 3;

/**
 * The unpack job: takes the members of a staged archive into its night, as if each had been dropped. What is wrong with
 * one loses no other; what is wrong with the archive loses none before it. Run twice, the second finds the members there.
 */
export async function unpackArchive(uploadId: string, jobId: string): Promise<void> {
  const upload = await takeUnpacking(uploadId);
  const night = upload && (await findNight(upload.nightId));
  if (!upload || !night || upload.state !== 'unpacking') {
    await inTransaction((transaction) => fulfil([jobId], transaction));
    return;
  }
  const unpacking = new Unpacking(night, upload);
  if (upload.tries > TRIES) unpacking.tell(unpackerFault(upload.name));
  else await unpacking.run();
  const { tally, problems } = unpacking.outcome();
  const state = tally.taken + tally.already > 0 ? 'done' : 'failed';
  await inTransaction(async (transaction) => {
    await settleUnpacked(uploadId, { state, unpacked: tally, problems }, transaction);
    await touchNights([night.id], transaction);
    await fulfil([jobId], transaction);
  });
  await staging().remove(uploadId);
  nudge('nights', night.id);
  log.info({ upload: uploadId, ...tally }, 'archive unpacked');
}

class Unpacking {
  private readonly tally = { taken: 0, already: 0, refused: 0 };
  private readonly problems: Problem[] = [];
  private stored: StoredBytes[] = [];
  private bombs = 0;
  /** SHA-256 by path: two members of one path can't both be meant. */
  private readonly digests = new Map<string, string>();

  constructor(
    private readonly night: NightAdmitted,
    private readonly upload: UploadRow,
  ) {}

  tell(problem: Problem): void {
    if (this.problems.length < PROBLEMS_TOLD) this.problems.push(problem);
  }

  outcome() {
    const untold = this.tally.refused - this.problems.length;
    const more: Problem = {
      code: 'archive-more',
      what: `${untold} more members were refused.`,
      where: this.upload.name,
      mend: 'Mend the ones told, pack again, and hand it in once more.',
    };
    const problems = untold > 0 ? [...this.problems, more] : this.problems;
    return { tally: this.tally, problems };
  }

  async run(): Promise<void> {
    const { id, name, archiveKind: kind } = this.upload;
    let members = 0;
    try {
      for await (const member of archiveMembers(id, name, kind!)) {
        if (++members > MAX_MEMBERS) {
          const mend = `One archive may hold ${MAX_MEMBERS}: hand in several.`;
          throw problemAt({ file: name }, 'archive-too-many', 'It holds more members than are taken.', mend);
        }
        await this.take(member);
      }
      if (members === 0) {
        throw problemAt({ file: name }, 'archive-empty', 'The archive holds no file.', 'Check how it was packed.');
      }
    } catch (error) {
      if (!(error instanceof InputProblem)) throw error;
      const { what, mend } = error.problem;
      const sofar = this.tally.taken + this.tally.already + this.stored.length;
      this.tell({ ...error.problem, what: sofar ? `${what} The ${sofar} members before it were taken.` : what, mend });
    }
    await this.settle();
  }

  private refuse(path: string, { code, what, mend }: { code: string; what: string; mend: string }): void {
    this.tally.refused++;
    this.tell({ code, what, mend, where: `${this.upload.name}, ${path.slice(0, MOST_OF_NAME)}` });
  }

  private async take(member: ArchiveMember): Promise<void> {
    if ('refused' in member) return this.refuse(member.path, member.refused);
    const { path } = member;
    try {
      const { head, whole } = await peekBytes(member.body, HEAD_BYTES);
      if (archiveKind(head)) return this.refuse(path, NESTED);
      const bytes = await storeBytes({ name: path, stream: whole });
      const before = this.digests.get(path);
      if (before !== undefined && before !== bytes.sha256) return this.refuse(path, SAME_PATH);
      this.digests.set(path, bytes.sha256);
      this.stored.push(bytes);
      if (this.stored.length >= MEMBERS_PER_TRANSACTION) await this.settle();
    } catch (error) {
      if (error instanceof Refusal && error.code !== 'unavailable') {
        this.refuse(path, { code: 'archive-member', what: error.what, mend: error.mend });
      } else if (error instanceof InputProblem && isOfMember(error, this.upload)) {
        this.refuse(path, error.problem);
        if (error.problem.code === 'archive-bomb' && ++this.bombs > BOMBS) {
          const what = 'Several of its members are packed beyond all reason; the rest was not looked at.';
          throw problemAt({ file: this.upload.name }, 'archive-bomb', what, 'Hand in its files unpacked.');
        }
      } else throw error;
    }
  }

  private async settle(): Promise<void> {
    const stored = this.stored;
    this.stored = [];
    for (const { already } of await addToNight(this.night, stored)) this.tally[already ? 'already' : 'taken']++;
  }
}

/** A zip's members can be read each by itself; in a tar nothing behind a fault can be. */
const isOfMember = ({ problem }: InputProblem, { archiveKind: kind, name }: UploadRow): boolean =>
  kind === 'zip' && problem.where !== name;

const NESTED = {
  code: 'archive-nested',
  what: 'This member is an archive itself; archives in archives are not unpacked.',
  mend: 'Hand it in by itself.',
};
const SAME_PATH = {
  code: 'archive-same-path',
  what: 'The archive holds another member of this very path with other bytes; the first was taken.',
  mend: 'If this one was meant, hand it in by itself.',
};
const unpackerFault = (name: string): Problem => ({
  code: 'unpacker-fault',
  what: 'Unpacking failed three times.',
  where: name,
  mend: 'Hand in its files unpacked; if the archive opens elsewhere, tell the maintainers, for the fault is ours.',
});
