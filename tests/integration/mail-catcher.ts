import { text } from 'node:stream/consumers';
import type { AddressInfo } from 'node:net';
import { SMTPServer } from 'smtp-server';

export interface CaughtMail {
  to: string[];
  /** As it came over the wire. */
  raw: string;
  /** The text, its transfer encoding undone. */
  text: string;
}

export interface MailCatcher {
  url: string;
  caught: CaughtMail[];
  /** Refuse the next letters with this reply code; null takes them. */
  refuse: (code: number | null) => void;
  /** How often it has refused an address. */
  refusals: () => number;
  close(): Promise<void>;
}

/** Undoes quoted-printable (RFC 2045, section 6.7). */
function decode(body: string): string {
  const bytes = body
    .replace(/=\r?\n/g, '')
    .replace(/=([0-9A-F]{2})/gi, (_, hex: string) => String.fromCharCode(parseInt(hex, 16)));
  return Buffer.from(bytes, 'latin1').toString('utf8');
}

/** A mail server on a port of its own that keeps what it is given. */
export async function startMailCatcher(): Promise<MailCatcher> {
  const caught: CaughtMail[] = [];
  let refusal: number | null = null;
  let refusals = 0;
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    onRcptTo(_address, _session, callback) {
      if (refusal === null) return callback();
      refusals++;
      callback(Object.assign(new Error('no such mailbox'), { responseCode: refusal }));
    },
    onData(stream, session, callback) {
      void text(stream).then((raw) => {
        const body = raw.slice(raw.search(/\r?\n\r?\n/));
        const isQuoted = /content-transfer-encoding: quoted-printable/i.test(raw);
        const to = session.envelope.rcptTo.map(({ address }) => address);
        caught.push({ to, raw, text: isQuoted ? decode(body) : body });
        callback();
      });
    },
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', () => resolve()));
  const { port } = server.server.address() as AddressInfo;
  return {
    url: `smtp://127.0.0.1:${port}`,
    caught,
    refuse: (code) => void (refusal = code),
    refusals: () => refusals,
    close: () => new Promise((resolve) => server.close(() => resolve())),
  };
}
