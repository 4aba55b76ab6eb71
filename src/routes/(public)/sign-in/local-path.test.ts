import { describe, expect, it } from 'vitest';
import { localPath } from './local-path';

describe('localPath', () => {
  it('keeps a path of this site with its query', () => {
    expect(localPath('/nights/0198?sort=-redshift#table')).toBe('/nights/0198?sort=-redshift#table');
  });
  it.each([
    '//elsewhere.example/nights',
    '/\\elsewhere.example',
    '/\t/elsewhere.example',
    'https://elsewhere.example/',
    'javascript:alert(1)',
    'nights',
    '',
    null,
    undefined,
  ])('sends %j to the first page', (text) => {
    expect(localPath(text)).toBe('/');
  });
});
