import { execFileSync } from 'node:child_process';
import { existsSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { configSchema } from '$lib/server/config/config';
import { JOBS } from '$lib/server/queue/jobs';
import { handlers } from '../../worker/jobs/handlers';

const tracked = execFileSync('git', ['ls-files', '-co', '--exclude-standard'], { encoding: 'utf8' })
  .split('\n')
  .filter((path) => path && existsSync(path));
const sources = tracked.filter((path) => /\.(ts|svelte|mjs|cjs|js|css|html|sh)$/.test(path));

const LINES = 250;

describe('the tree', () => {
  it(`has no source over ${LINES} lines without a reason in its head`, () => {
    const long = sources.filter((path) => {
      const text = readFileSync(path, 'utf8');
      return text.split('\n').length > LINES + 1 && !/reason for the length:/i.test(text.slice(0, 1500));
    });
    expect(long).toEqual([]);
  });

  it('keeps its top level to what the contributors page lists', () => {
    const page = readFileSync('DEVELOPERS.md', 'utf8');
    const top = [...new Set(tracked.map((path) => path.split('/')[0]))];
    expect(top.filter((name) => !page.includes(`\`${name}\``))).toEqual([]);
  });

  it('names no file after a bag', () => {
    expect(sources.filter((path) => /(^|\/)(utils?|helpers?|common|misc|shared)(\.|\/)/.test(path))).toEqual([]);
  });

  it('holds no path of a machine and no registry in its lock file', () => {
    const texts = tracked.filter((path) => !/\.(fits|gz|woff2|png)$/.test(path));
    const home = new RegExp(`(^|[\\s'"\`(])/(${['home', 'root', 'Users'].join('|')})/[a-z]`, 'm');
    expect(texts.filter((path) => home.test(readFileSync(path, 'utf8')))).toEqual([]);
    expect(readFileSync('package-lock.json', 'utf8')).not.toMatch(/"resolved": *"http/);
  });
});

describe('declarations', () => {
  it('describe every environment variable on the contributors page', () => {
    const page = readFileSync('DEVELOPERS.md', 'utf8');
    expect(Object.keys(configSchema.shape).filter((name) => !page.includes(`\`${name}\``))).toEqual([]);
  });

  it('have exactly one handler for every job', () => {
    expect(Object.keys(handlers).sort()).toEqual(Object.keys(JOBS).sort());
  });
});
