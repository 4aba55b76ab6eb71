import { decodeReviewSpectrum, type ReviewSpectrum } from '$lib/domain/review-spectrum';

/** Spectra kept: the one on the desk, those of its target, three ahead, and the last few for undo and a look back. */
const KEPT = 20;

/** Pixels of spectra by id, fetched once, so that the next spectrum is here before it is asked for. */
class PixelCache {
  #waiting = new Map<string, Promise<ReviewSpectrum>>();
  #ready = new Map<string, ReviewSpectrum>();

  /** A spectrum that has already arrived, or null. */
  ready(id: string): ReviewSpectrum | null {
    return this.#ready.get(id) ?? null;
  }

  /** The spectrum, from here or from the server; a failed fetch is tried anew at the next call. */
  get(id: string): Promise<ReviewSpectrum> {
    const waiting = this.#waiting.get(id) ?? this.#fetch(id);
    // The newest stands last, so that the oldest is the first to go.
    this.#waiting.delete(id);
    this.#waiting.set(id, waiting);
    for (const old of [...this.#waiting.keys()].slice(0, -KEPT)) {
      this.#waiting.delete(old);
      this.#ready.delete(old);
    }
    return waiting;
  }

  /** Starts fetching; what goes wrong is said when the spectrum is reached. */
  ahead(ids: readonly string[]): void {
    for (const id of ids) if (!this.#waiting.has(id)) this.get(id).catch(() => {});
  }

  async #fetch(id: string): Promise<ReviewSpectrum> {
    try {
      const response = await fetch(`/review/${id}/pixels`);
      if (!response.ok) throw new Error(await reasonOf(response));
      const spectrum = decodeReviewSpectrum(await response.arrayBuffer());
      if (this.#waiting.has(id)) this.#ready.set(id, spectrum);
      return spectrum;
    } catch (cause) {
      this.#waiting.delete(id);
      throw cause;
    }
  }
}

/** What the server says in its problem details (RFC 9457), or the bare status. */
async function reasonOf(response: Response): Promise<string> {
  const body: unknown = await response.json().catch(() => null);
  const detail = body && typeof body === 'object' && 'detail' in body ? body.detail : null;
  return typeof detail === 'string' ? detail : `The server answered ${response.status}.`;
}

export const pixelCache = new PixelCache();
