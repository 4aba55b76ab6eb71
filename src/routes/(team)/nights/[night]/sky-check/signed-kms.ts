import { trueMinus } from '$lib/ui/format/true-minus';
import { withError } from '$lib/ui/format/with-error';

/** Nothing finer is told of a wavelength scale, km/s. */
const FINEST_KMS = 0.01;

/** A velocity with its sign, `+1.2 ± 0.3`; one decimal where the error is not known, two where it is under 0.01. */
export function signedKms(kms: number, errorKms: number | null): string {
  const text =
    errorKms === null
      ? trueMinus(kms.toFixed(1))
      : errorKms < FINEST_KMS
        ? `${trueMinus(kms.toFixed(2))} ± under ${FINEST_KMS}`
        : withError(kms, errorKms, 1);
  return kms > 0 && /[1-9]/.test(text.split('±')[0]) ? `+${text}` : text;
}
