import { z } from 'zod';
import type { ReviewSpectrum } from '$lib/domain/review-spectrum';
import { pixelCache } from './pixel-cache';

const answerSchema = z.object({ beside: z.array(z.object({ id: z.string(), label: z.string() })) });

/** Another spectrum of the target with its place in the list, which gives its look. */
export interface BesideSpectrum {
  label: string;
  place: number;
  pixels: ReviewSpectrum;
}

/** The target's other spectra, fetched when they are asked for and drawn under the one on the desk. */
export class BesideSpectra {
  shown = $state(false);
  /** Why there is nothing to draw, a sentence; null where there is. */
  remark = $state<string | null>(null);
  all = $state.raw<BesideSpectrum[]>([]);
  #asked = false;
  #id: string;

  constructor(id: string) {
    this.#id = id;
  }

  async toggle(): Promise<void> {
    this.shown = !this.shown;
    if (!this.shown || this.#asked) return;
    this.#asked = true;
    this.remark = 'Loading the target’s other spectra';
    try {
      const response = await fetch(`/review/${this.#id}/beside`);
      if (!response.ok) throw new Error(`The server answered ${response.status}.`);
      const { beside } = answerSchema.parse(await response.json());
      this.all = await Promise.all(
        beside.map(async ({ id, label }, place) => ({ label, place, pixels: await pixelCache.get(id) })),
      );
      this.remark = beside.length ? null : 'There is no other spectrum of this target to show';
    } catch (cause) {
      this.#asked = false;
      this.remark = `The target’s other spectra could not be had. ${(cause as Error).message}`;
    }
  }
}
