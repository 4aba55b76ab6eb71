import type { RepeatFigures } from '$lib/science/review/measure-repeats';

/** What repeats say of the quoted errors, a sentence or two for people. Within two standard errors of 1 is honest. */
export function errorsInWords({ pairs, others, robustWidth, robustWidthError }: RepeatFigures): string {
  const wrong = others ? ` ${others === 1 ? 'One pair is' : `${others} pairs are`} two different answers.` : '';
  if (robustWidth === null || robustWidthError === null) {
    return `${pairs === 1 ? 'One pair is' : `${pairs} pairs are`} too few to tell whether the errors are honest.${wrong}`;
  }
  const width = `${robustWidth.toFixed(2)} ± ${robustWidthError.toFixed(2)}`;
  if (Math.abs(robustWidth - 1) <= 2 * robustWidthError) {
    return `The errors are honest as far as ${pairs} pairs can tell: the pulls are ${width} wide, and honest ones 1.${wrong}`;
  }
  const factor = robustWidth > 1 ? robustWidth : 1 / robustWidth;
  const which = robustWidth > 1 ? 'too small' : 'too large';
  return `The errors are ${which} by a factor of ${factor.toFixed(1)}: the pulls of ${pairs} pairs are ${width} wide, and honest ones 1.${wrong}`;
}
