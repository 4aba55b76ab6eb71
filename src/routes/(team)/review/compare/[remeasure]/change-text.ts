import type { AcceptancePreview, Change } from '$lib/domain/comparison';
import { countText } from '$lib/ui/format/count';

/** What became of an answer, in words. */
export const CHANGE_TEXT: Record<Change, string> = {
  moved: 'other redshift',
  lost: 'redshift lost',
  found: 'redshift found',
  confidence: 'other word',
  alike: 'alike',
};

const spectra = (count: number) => (count === 1 ? '1 spectrum' : `${countText(count)} spectra`);

/** What accepting would do, in a sentence: `Would accept 132 spectra; leaves 4 with open questions alone.` */
export function previewText({ accept, leave }: AcceptancePreview): string {
  const left = [
    leave.open > 0 && `${countText(leave.open)} with open questions`,
    leave.otherwise > 0 && `${countText(leave.otherwise)} that people judged otherwise`,
    leave.unseen > 0 && `${countText(leave.unseen)} that others have judged and you have not`,
    leave.current > 0 && `${countText(leave.current)} accepted already`,
  ].filter((part) => part !== false);
  const alone = left.length > 0 ? `; leaves ${left.join(', ')} alone` : '';
  return `Would accept ${spectra(accept)}${alone}.`;
}
