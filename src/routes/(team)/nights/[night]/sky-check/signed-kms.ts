import { trueMinus } from '$lib/ui/format/true-minus';
import { withError } from '$lib/ui/format/with-error';

/** A velocity with its sign, `+1.2 ± 0.3`; one decimal where the error is not known. */
export function signedKms(kms: number, errorKms: number | null): string {
  const text = errorKms === null ? trueMinus(kms.toFixed(1)) : withError(kms, errorKms, 1);
  return kms > 0 && /[1-9]/.test(text.split('±')[0]) ? `+${text}` : text;
}
