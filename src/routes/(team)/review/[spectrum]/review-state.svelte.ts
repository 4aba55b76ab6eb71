import type { FittedLine } from '$lib/charts/expected-line';
import { expectedLines, isSeen, linesOutside } from '$lib/charts/expected-line';
import { clampView } from '$lib/charts/layout/spectrum-frame';
import { pixelEdges } from '$lib/charts/layout/pixel-edges';
import { NO_BANDS, observerBands } from '$lib/charts/observer-bands';
import type { Confidence } from '$lib/domain/confidence';
import type { Flag } from '$lib/domain/flag';
import type { Mask } from '$lib/domain/mask';
import type { Measurement } from '$lib/domain/measurement';
import type { ReviewSpectrum } from '$lib/domain/review-spectrum';
import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { BesideSpectra } from './beside.svelte';
import { lineFitter, type LineFitter } from './line-fit';
import { MaskList } from './mask-list.svelte';

export const REDSHIFT_MIN = -0.003;
export const REDSHIFT_MAX = 7.5;
/** Width of the view when a line is chosen, ångström. */
const CLOSE_UP = 420;
/** Intrinsic FWHM of lines where no candidate has one, km/s: a usual galaxy. */
const USUAL_FWHM_KMS = 200;

/** Nearer than this, km/s, a second redshift is the first one again. */
const SAME_KMS = 100;

interface SecondRedshift {
  redshift: number;
  /** 1 sigma; null where it was moved by hand and not snapped. */
  redshiftError: number | null;
}

/** What a person said of the spectrum before, as a second look takes it up. */
interface Before {
  masks: readonly Mask[];
}

interface View {
  from: number;
  to: number;
}

/** One spectrum on the desk: the redshift being weighed and everything that follows it; the one owner of all views. */
export class ReviewState {
  readonly id: string;
  readonly measurement: Measurement;

  pixels = $state.raw<ReviewSpectrum | null>(null);
  /** Why the pixels could not be had. */
  problem = $state<string | null>(null);

  redshift = $state(0);
  /** Index of the candidate the redshift comes from, or null where it was moved by hand. */
  candidate = $state<number | null>(null);
  /** 1 sigma of a redshift moved by hand: known only once it was snapped to a fit. */
  snappedError = $state<number | null>(null);
  /** A second object in the same light, kept while the redshift moves on. */
  second = $state.raw<SecondRedshift | null>(null);
  /** Whether a person has moved the redshift since the spectrum or a candidate was taken. */
  moved = $state(false);

  view = $state.raw<View>({ from: 0, to: 1 });
  chosenLine = $state<string | null>(null);
  smooth = $state(false);
  /** Factor on the height of the flux axis; the axis itself follows the data. */
  fluxZoom = $state(1);
  /** Ends of the flux axis set by hand, unit of flux; null where it follows the data. */
  fluxRange = $state.raw<{ bottom: number; top: number } | null>(null);
  /** Wavelength under the pointer, ångström. */
  pointer = $state<number | null>(null);

  /** Asked of the person, never taken from the engine, so that nobody is led. */
  confidence = $state<Confidence | null>(null);
  flags = $state<Flag[]>([]);
  comment = $state('');
  /** A verdict is on its way: the same key once more is not a second one. */
  given = $state(false);

  readonly masks: MaskList;
  readonly beside: BesideSpectra;

  /**
   * @param pixels where they are here already: the plots then stay as they are and only draw anew
   * @param before the person's own verdict that stands
   */
  constructor(
    spectrum: { id: string; measurement: Measurement },
    pixels: ReviewSpectrum | null = null,
    before: Before | null = null,
  ) {
    this.beside = new BesideSpectra(spectrum.id);
    this.masks = new MaskList(before?.masks, () => (this.snappedError = null));
    this.id = spectrum.id;
    this.measurement = spectrum.measurement;
    if (spectrum.measurement.candidates.length > 0) this.choose(0);
    if (pixels) this.receive(pixels);
  }

  whole: View = $derived.by(() => {
    const { wavelength } = this.pixels ?? { wavelength: new Float64Array() };
    if (wavelength.length === 0) return { from: 0, to: 1 };
    const { left, right } = pixelEdges(wavelength);
    return { from: left[0], to: right[right.length - 1] };
  });
  bands = $derived.by(() => (this.pixels ? observerBands(this.pixels) : NO_BANDS));
  #fitter: LineFitter | null = $derived.by(() => this.pixels && lineFitter(this.pixels, this.masks.masks));
  /** The width of the candidate last chosen: held while the redshift moves, so that a drag stays quick. */
  #fwhmKms = $state(USUAL_FWHM_KMS);
  fit: { lines: FittedLine[]; model: Float64Array; continuum: Float64Array } = $derived.by(
    () =>
      this.#fitter?.at(this.redshift, this.#fwhmKms) ?? {
        lines: [],
        model: new Float64Array(),
        continuum: new Float64Array(),
      },
  );
  lines = $derived.by(() => expectedLines(this.fit.lines));
  outside = $derived.by(() => (this.pixels ? linesOutside(this.redshift, this.whole.from, this.whole.to) : []));
  /** What the plots show, in words. */
  summary = $derived.by(() => {
    const seen = this.lines.filter(isSeen).map(({ label, signalToNoise }) => `${label} (${signalToNoise.toFixed(1)})`);
    return `Redshift ${this.redshift.toFixed(5)}. Lines seen at signal-to-noise 3 or more: ${seen.join(', ') || 'none'}.`;
  });

  receive(pixels: ReviewSpectrum): void {
    this.pixels = pixels;
    this.view = this.whole;
  }

  /** Takes a candidate: everything moves to it. Confidence is asked again, since it was given for another redshift. */
  choose(index: number): void {
    const candidate = this.measurement.candidates[index];
    if (!candidate) return;
    if (this.candidate !== index) this.confidence = null;
    this.candidate = index;
    this.redshift = candidate.redshift;
    this.#fwhmKms = candidate.fwhmKms ?? USUAL_FWHM_KMS;
    this.snappedError = null;
    this.moved = false;
  }

  /** The candidate above or below; from a redshift moved by hand, back to the first. */
  step(by: 1 | -1): void {
    const { length } = this.measurement.candidates;
    if (length > 0) this.choose(this.candidate === null ? 0 : (this.candidate + by + length) % length);
  }

  /** Sets the redshift by hand; out of range is brought to the nearest end. */
  move(redshift: number): void {
    if (!Number.isFinite(redshift)) return;
    if (this.candidate !== null) this.confidence = null;
    this.candidate = null;
    this.snappedError = null;
    this.moved = true;
    this.redshift = Math.min(REDSHIFT_MAX, Math.max(REDSHIFT_MIN, redshift));
  }

  nudge(kms: number): void {
    this.move((1 + this.redshift) * (1 + kms / SPEED_OF_LIGHT_KMS) - 1);
  }

  /** Moves to the best fit near; where that is a candidate's own redshift, the candidate is taken. */
  snap(): void {
    if (!this.#fitter) return;
    const best = this.#fitter.snap(this.redshift, this.#fwhmKms);
    // A fit that leaves pixels out is another fit than the engine's, however near.
    const own = this.masks.masks.length > 0;
    const near = this.measurement.candidates.findIndex(
      ({ redshift }) => Math.abs(redshift - best.redshift) / (1 + redshift) < 25 / SPEED_OF_LIGHT_KMS,
    );
    if (near >= 0 && !own) return this.choose(near);
    this.move(best.redshift);
    this.snappedError = best.redshiftError;
  }

  /** Keeps the redshift as the second one while another is looked for; the same again lets it go. */
  keepSecond(): void {
    const { redshift, candidate, snappedError } = this;
    const apartKms = (SPEED_OF_LIGHT_KMS * Math.abs(redshift - (this.second?.redshift ?? Infinity))) / (1 + redshift);
    if (apartKms < SAME_KMS) return this.dropSecond();
    const redshiftError = candidate === null ? snappedError : this.measurement.candidates[candidate].redshiftError;
    this.second = { redshift, redshiftError };
    if (!this.flags.includes('two redshifts')) this.flag('two redshifts', true);
  }

  dropSecond(): void {
    this.second = null;
    this.flag('two redshifts', false);
  }

  /** Centres all views on a line; choosing it again shows the whole spectrum. */
  chooseLine(name: string): void {
    const line = this.lines.find((one) => one.line === name);
    if (!line) return;
    const again = this.chosenLine === name && this.view.to - this.view.from < 1000;
    this.chosenLine = again ? null : name;
    if (again) this.show(this.whole.from, this.whole.to);
    else this.show(line.wavelengthObserved - CLOSE_UP / 2, line.wavelengthObserved + CLOSE_UP / 2);
  }

  show(from: number, to: number): void {
    if (Number.isFinite(from) && Number.isFinite(to) && this.pixels) {
      this.view = clampView(from, to, this.whole.from, this.whole.to);
    }
  }

  /** Stretches or squeezes the flux axis about its foot. */
  zoomFlux(factor: number): void {
    this.fluxRange = null;
    this.fluxZoom = Math.min(100, Math.max(0.01, this.fluxZoom * factor));
  }

  /** Zooms about the chosen line, or about the middle of the view. */
  zoom(factor: number): void {
    const line = this.lines.find((one) => one.line === this.chosenLine);
    const middle = line?.wavelengthObserved ?? (this.view.from + this.view.to) / 2;
    const half = ((this.view.to - this.view.from) * factor) / 2;
    this.show(middle - half, middle + half);
  }

  showAll(): void {
    this.chosenLine = null;
    this.fluxZoom = 1;
    this.fluxRange = null;
    this.show(this.whole.from, this.whole.to);
  }

  flag(flag: Flag, on: boolean): void {
    this.flags = on ? [...this.flags, flag] : this.flags.filter((other) => other !== flag);
  }

  /** What keeps a kind of verdict from being given, in words; null where nothing does. */
  missing(kind: 'candidate' | 'by hand' | 'no redshift'): string | null {
    if (this.flags.includes('other') && this.comment.trim() === '') return 'Say in the comment what "other" is';
    if (kind === 'no redshift') return null;
    if (kind === 'candidate' && this.candidate === null)
      return this.moved
        ? 'The redshift was moved by hand: set it, or choose a candidate'
        : 'There is no candidate to accept';
    if (kind === 'by hand' && !this.moved) return 'Move the redshift first';
    const apart = this.second && Math.abs(this.redshift - this.second.redshift) / (1 + this.redshift);
    if (apart !== null && apart * SPEED_OF_LIGHT_KMS < SAME_KMS) return 'The second redshift is the first one';
    if (this.confidence === null) return 'Give a confidence';
    if (this.confidence === 'none') return 'The word none goes with no redshift';
    return null;
  }
}
