/** Why a request is refused; each has one HTTP status in `$lib/api/problem-details`. */
export type RefusalCode =
  | 'not-signed-in'
  | 'forbidden'
  | 'not-found'
  | 'conflict'
  | 'invalid'
  | 'too-large'
  | 'too-many'
  | 'unsupported'
  | 'unavailable';

/** An expected refusal: what is wrong and how to mend it, in words for the person. Anything else thrown is a fault. */
export class Refusal extends Error {
  constructor(
    readonly code: RefusalCode,
    readonly what: string,
    readonly mend = '',
    /** Field or place the refusal is about. */
    readonly where = '',
  ) {
    super(mend ? `${what} ${mend}` : what);
    this.name = 'Refusal';
  }
}
