/**
 * A path of this site from text that a link may have brought; `/` where it is none.
 * Anything that a browser could read as another host (`//host`, `/\host`, a scheme) is none.
 */
export function localPath(text: string | null | undefined): string {
  if (!text?.startsWith('/')) return '/';
  const here = new URL('http://farglow.invalid');
  try {
    const url = new URL(text, here);
    return url.origin === here.origin ? url.pathname + url.search + url.hash : '/';
  } catch {
    return '/';
  }
}
