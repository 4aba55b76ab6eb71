import { createTransport } from 'nodemailer';
import { config } from '../config/config';

/** A letter as it is sent: plain text, which every reader shows. */
export interface Letter {
  to: string;
  subject: string;
  text: string;
}

/** Longer than any server that is well takes to answer. */
const ANSWER_MS = 20_000;

/** Whether this installation can send mail. */
export function mailIsConfigured(): boolean {
  return config().SMTP_URL !== undefined;
}

/** A letter that will not arrive however often it is sent: the server refused it for good (RFC 5321, replies 5yz). */
export class LetterRefused extends Error {
  override name = 'LetterRefused';
}

/** Hands a letter to the mail server; throws LetterRefused for a refusal for good, anything else for a passing trouble. */
export async function deliver(letter: Letter): Promise<void> {
  const transport = createTransport({
    url: config().SMTP_URL,
    connectionTimeout: ANSWER_MS,
    greetingTimeout: ANSWER_MS,
    socketTimeout: ANSWER_MS,
    disableFileAccess: true,
    disableUrlAccess: true,
  });
  try {
    await transport.sendMail({ from: config().MAIL_FROM, ...letter });
  } catch (error) {
    const { responseCode, message } = error as { responseCode?: number; message: string };
    if (responseCode !== undefined && responseCode >= 500) throw new LetterRefused(message);
    throw error;
  } finally {
    transport.close();
  }
}
