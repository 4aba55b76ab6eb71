import { Checker } from './checker';
import { Upload } from './upload.svelte';

// eslint-disable-next-line svelte/prefer-svelte-reactivity -- nothing draws this map; a page asks it once
const uploads = new Map<string, Upload>();

/** The upload of a night in this browser tab: it goes on while other pages are looked at. */
export function uploadOf(nightId: string): Upload {
  if (typeof window === 'undefined') return new Upload(nightId);
  let upload = uploads.get(nightId);
  if (!upload) {
    // Its derived values must outlive the page that asked first.
    $effect.root(() => {
      upload = new Upload(nightId, new Checker(nightId));
    });
    uploads.set(nightId, upload!);
  }
  return upload!;
}
