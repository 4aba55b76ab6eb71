import { Readable, type Transform } from 'node:stream';
import { createGunzip, createInflateRaw } from 'node:zlib';
import { Expansion } from '$lib/formats/archive/expansion';
import type { ArchiveMember } from '$lib/formats/archive/member';
import { readTar } from '$lib/formats/archive/read-tar';
import { readZip } from '$lib/formats/archive/read-zip';
import { problemAt } from '$lib/formats/place';
import type { ArchiveKind } from '../database/queries/uploads';
import { staging } from '../storage/staging';

const CHUNK = { chunkSize: 256 * 1024 };

/** The bytes of a source behind a transform, each let go when the other ends. */
function through(source: AsyncIterable<Uint8Array>, transform: Transform): AsyncIterable<Uint8Array> {
  const readable = Readable.from(source);
  readable.on('error', (error) => transform.destroy(error));
  transform.on('close', () => readable.destroy());
  return readable.pipe(transform);
}

async function* gunzipped(source: AsyncIterable<Uint8Array>, name: string): AsyncGenerator<Uint8Array> {
  try {
    yield* through(source, createGunzip(CHUNK));
  } catch (error) {
    const isCut = (error as NodeJS.ErrnoException).code === 'Z_BUF_ERROR';
    throw problemAt(
      { file: name },
      isCut ? 'archive-cut' : 'archive-damaged',
      isCut ? 'The archive ends early.' : 'The archive is damaged: its gzip data are broken.',
      'Copy or pack it again and hand it in once more.',
    );
  }
}

async function* counted(source: AsyncIterable<Uint8Array>, expansion: Expansion): AsyncGenerator<Uint8Array> {
  for await (const chunk of source) {
    expansion.count(chunk.length);
    yield chunk;
  }
}

/** The members of a staged archive as streams; what comes out in all is bounded, counted as it comes. */
export async function* archiveMembers(id: string, name: string, kind: ArchiveKind): AsyncGenerator<ArchiveMember> {
  const access = await staging().openAt(id);
  try {
    if (kind === 'zip') {
      // Each member has its own ratio there; all together only a total.
      const expansion = new Expansion(Infinity, name);
      for await (const member of readZip(access, name, (packed) => through(packed, createInflateRaw(CHUNK)))) {
        yield 'body' in member ? { path: member.path, body: counted(member.body, expansion) } : member;
      }
    } else {
      const expansion = new Expansion(access.sizeBytes, name);
      const packed = staging().read(id);
      yield* readTar(counted(kind === 'tar' ? packed : gunzipped(packed, name), expansion), name);
    }
  } finally {
    await access.close();
  }
}
