import { z } from 'zod';

const STORED_UNDER = 'farglow-plot';
/** Widths that the smoothing may have: Gaussian sigma, pixels. */
export const SMOOTH_PIXELS = [1.5, 3, 6] as const;

const schema = z.object({
  smoothPixels: z.union([z.literal(1.5), z.literal(3), z.literal(6)]).default(1.5),
  residuals: z.boolean().default(false),
  observatory: z.boolean().default(false),
});
type Choices = z.output<typeof schema>;

/** Reads stored choices; what is not understood falls back to the usual ones. */
export function parsePlotChoices(text: string | null): Choices {
  try {
    return schema.parse(JSON.parse(text ?? '{}'));
  } catch {
    return schema.parse({});
  }
}

/** What this browser's spectrum plot shows, kept from one spectrum to the next. */
class PlotChoices {
  #choices = $state.raw<Choices>(schema.parse({}));

  /** Called once the page runs in a browser. */
  load(): void {
    this.#choices = parsePlotChoices(localStorage.getItem(STORED_UNDER));
  }

  change(choices: Partial<Choices>): void {
    this.#choices = { ...this.#choices, ...choices };
    localStorage.setItem(STORED_UNDER, JSON.stringify(this.#choices));
  }

  get smoothPixels() {
    return this.#choices.smoothPixels;
  }
  get residuals() {
    return this.#choices.residuals;
  }
  get observatory() {
    return this.#choices.observatory;
  }
}

export const plotChoices = new PlotChoices();
