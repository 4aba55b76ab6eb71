import { Readable } from 'node:stream';
import type { ReadableStream as NodeReadableStream } from 'node:stream/web';
import busboy from 'busboy';
import { archiveKind, HEAD_BYTES } from '$lib/formats/archive/archive-kind';
import { Refusal } from '$lib/domain/refusal';
import type { Actor } from '../auth/permissions';
import { peekBytes } from './peek-bytes';
import { FOREIGN_ARCHIVE } from './queue-archive';
import { admitToNight } from './receive-file';
import { Shelf, type Upload } from './shelf';
import { stageArchive } from './stage-archive';

/** More parts than this in one request are refused; a night may have any number of requests. */
const FILES_PER_REQUEST = 5_000;

/** A part up to this size is held in memory, so that the next can be read while it is made safe on the disk. */
const SMALL_BYTES = 1024 * 1024;

/**
 * Takes the parts of a multipart body to storage as they come. A part that is refused loses no other; where
 * every part is, the first refusal is thrown, so that the whole answer is a 4xx.
 */
export async function receiveUpload(actor: Actor | null, nightId: string, request: Request): Promise<Upload> {
  const night = await admitToNight(actor, nightId);
  const contentType = request.headers.get('content-type') ?? '';
  if (!/^multipart\/form-data/i.test(contentType) || !request.body) {
    throw new Refusal('unsupported', 'Files come as multipart/form-data.', 'Use a form, or curl -F file=@NAME.');
  }
  const body = Readable.fromWeb(request.body as unknown as NodeReadableStream);
  const upload: Upload = { files: [], refused: [], archives: [] };
  const shelf = new Shelf(night, upload);

  const take = async (name: string, stream: Readable) => {
    const { head, isWhole, whole, release } = await peekBytes(stream, SMALL_BYTES);
    try {
      const kind = archiveKind(head.subarray(0, HEAD_BYTES));
      if (kind === 'foreign') throw new Refusal('unsupported', FOREIGN_ARCHIVE.what, FOREIGN_ARCHIVE.mend, name);
      if (kind) upload.archives.push(await stageArchive(night, actor!.userId, { name, kind, stream: whole }));
      else if (isWhole) await shelf.putBeside(name, head);
      else await shelf.put(name, whole);
    } catch (error) {
      shelf.refuse(name, error);
    } finally {
      await release();
      stream.resume();
    }
  };

  try {
    await parts(body, contentType, take);
  } finally {
    // What came whole before the connection broke stays: sending the rest again skips it.
    await shelf.end();
  }
  if (upload.files.length + upload.archives.length === 0) {
    throw (
      shelf.first ?? new Refusal('invalid', 'The body has no file.', 'Send at least one part with a filename.', 'file')
    );
  }
  return upload;
}

/** Calls `take` for each file part in turn; the body waits while one is written, so memory stays small. */
function parts(
  body: Readable,
  contentType: string,
  take: (name: string, stream: Readable) => Promise<void>,
): Promise<void> {
  return new Promise((resolve, reject) => {
    let parser: ReturnType<typeof busboy>;
    try {
      const limits = { files: FILES_PER_REQUEST, fields: 100, parts: FILES_PER_REQUEST + 100 };
      parser = busboy({ headers: { 'content-type': contentType }, limits, defParamCharset: 'utf8' });
    } catch {
      reject(new Refusal('unsupported', 'The multipart header has no boundary.', 'Let the client write it.'));
      return;
    }
    let queue = Promise.resolve();
    const fail = (error: unknown) => {
      body.unpipe(parser);
      body.resume();
      reject(error);
    };
    parser.on('file', (_field, stream, { filename }) => {
      queue = queue.then(() => take(filename ?? 'unnamed', stream));
      queue.catch(fail);
    });
    parser.on('filesLimit', () =>
      fail(new Refusal('too-large', `One request may bring ${FILES_PER_REQUEST} files.`, 'Send the rest in another.')),
    );
    parser.on('error', () =>
      fail(new Refusal('invalid', 'The multipart body is broken or ends early.', 'Send it again.')),
    );
    parser.on('close', () => queue.then(resolve, reject));
    body.on('error', () =>
      fail(new Refusal('invalid', 'The connection broke before the body was whole.', 'Send it again.')),
    );
    body.pipe(parser);
  });
}
