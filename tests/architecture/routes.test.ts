import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';

const METHODS = ['GET', 'POST', 'PUT', 'PATCH', 'DELETE'];
const ACCESS = ['public', 'signed-in', 'admin'];

const files = readdirSync('src/routes', { recursive: true, encoding: 'utf8' }).map((path) => join('src/routes', path));
const endpoints = files.filter((path) => path.endsWith('+server.ts'));
const pages = files.filter((path) => path.endsWith('.server.ts') && !path.endsWith('+server.ts'));

// Routes that anyone may reach: a new one is added here by hand, so that it is a decision.
const PUBLIC = [
  /^src\/routes\/\+layout\.server\.ts$/,
  /^src\/routes\/\(public\)\//,
  /^src\/routes\/api\/v1\/(health|catalogues)\b/,
  /^src\/routes\/vo\//,
];

type Guarded = { access?: string };
const load = async (path: string) =>
  (await import(/* @vite-ignore */ join(process.cwd(), path))) as Record<string, unknown>;

function check(path: string, name: string, handler: unknown) {
  const { access } = handler as Guarded;
  expect(ACCESS, `${path} ${name} is not made by a guard of $lib/server/auth/guards`).toContain(access);
  if (access === 'public') {
    const isListed = PUBLIC.some((pattern) => pattern.test(path));
    expect(isListed, `${path} ${name} is open to everyone, and not listed as such in this test`).toBe(true);
  }
}

describe('every route is guarded', () => {
  it('finds routes to walk', () => {
    expect(endpoints.length).toBeGreaterThan(3);
    expect(pages.length).toBeGreaterThan(3);
  });

  it.each(endpoints)('%s', async (path) => {
    const module = await load(path);
    const handlers = Object.entries(module).filter(([name]) => METHODS.includes(name) || name === 'fallback');
    expect(handlers.length).toBeGreaterThan(0);
    for (const [name, handler] of handlers) check(path, name, handler);
  });

  it.each(pages)('%s', async (path) => {
    const { load: loader, actions } = (await load(path)) as { load?: unknown; actions?: Record<string, unknown> };
    if (loader) check(path, 'load', loader);
    for (const [name, action] of Object.entries(actions ?? {})) check(path, name, action);
  });
});

describe('every use-case asks for permission', () => {
  const folders = ['ingest', 'measure', 'review', 'release', 'query', 'accounts', 'programmes'];
  const useCases = folders.flatMap((folder) => {
    const path = join('src/lib/server', folder);
    return readdirSync(path)
      .filter((name) => name.endsWith('.ts') && !name.endsWith('.test.ts'))
      .map((name) => join(path, name));
  });

  // One that takes an actor asks; one that takes none says in its docstring who may call it.
  it.each(useCases)('%s', (path) => {
    const text = readFileSync(path, 'utf8');
    const takesActor = /\bactor: Actor\b/.test(text);
    if (!takesActor) return;
    const asks =
      /\b(permit|permitSelf|may|programmesWhere|requireAdmin|admitToNight|ownUpload|readNight|readReport|readSpectrum)\(/.test(
        text,
      );
    const isPublic = /Public use-case/.test(text);
    expect(asks || isPublic, `${path} takes an actor and never asks what they may`).toBe(true);
  });
});
