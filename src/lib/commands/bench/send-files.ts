import { readFile } from 'node:fs/promises';
import { Agent, request } from 'node:http';
import { basename } from 'node:path';

/** As the upload page sends: files a request, and requests at once. */
const FILES_A_REQUEST = 12;
const REQUESTS = 3;
const BOUNDARY = 'farglow-bench-0d9f1b';

async function multipart(paths: readonly string[]): Promise<Buffer> {
  const parts: Buffer[] = [];
  for (const path of paths) {
    const disposition = `Content-Disposition: form-data; name="file"; filename="${basename(path)}"`;
    parts.push(Buffer.from(`--${BOUNDARY}\r\n${disposition}\r\nContent-Type: application/fits\r\n\r\n`));
    parts.push(await readFile(path), Buffer.from('\r\n'));
  }
  return Buffer.concat([...parts, Buffer.from(`--${BOUNDARY}--\r\n`)]);
}

function post(url: string, token: string, body: Buffer, agent: Agent): Promise<void> {
  return new Promise((resolve, reject) => {
    const headers = {
      authorization: `Bearer ${token}`,
      'content-type': `multipart/form-data; boundary=${BOUNDARY}`,
      'content-length': body.length,
    };
    const sent = request(url, { method: 'POST', headers, agent }, (answer) => {
      let text = '';
      answer.setEncoding('utf8');
      answer.on('data', (chunk: string) => (text += chunk));
      answer.on('end', () =>
        answer.statusCode === 202 ? resolve() : reject(new Error(`${answer.statusCode}: ${text.slice(0, 300)}`)),
      );
    });
    sent.on('error', reject);
    sent.end(body);
  });
}

/** Sends files to a night over HTTP, a few in a request and a few requests at once. */
export async function sendFiles(url: string, token: string, paths: readonly string[]): Promise<void> {
  const agent = new Agent({ keepAlive: true, maxSockets: REQUESTS });
  let next = 0;
  const send = async () => {
    while (next < paths.length) {
      const batch = paths.slice(next, (next += FILES_A_REQUEST));
      await post(url, token, await multipart(batch), agent);
    }
  };
  try {
    await Promise.all(Array.from({ length: REQUESTS }, send));
  } finally {
    agent.destroy();
  }
}
