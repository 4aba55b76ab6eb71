import type { Medium, RawSpectrum, Spectrum } from '$lib/domain/spectrum';
import { vacuumToAir } from '$lib/science/frames/air-vacuum';

/** The spectrum turned upside down: what were lines are now dips, so that any emission found in it is false. */
export function invertSign(spectrum: Spectrum): Spectrum {
  return { ...spectrum, name: `${spectrum.name ?? 'spectrum'}, inverted`, flux: spectrum.flux.map((value) => -value) };
}

/** Flux times a factor with the unit left as it was, or, with `unitScale`, unit and values scaled against each other. */
export function scaleFlux(spectrum: Spectrum, factor: number, keepPhysical = false): Spectrum {
  return {
    ...spectrum,
    flux: spectrum.flux.map((value) => value * factor),
    variance: spectrum.variance.map((value) => value * factor * factor),
    sky: spectrum.sky && spectrum.sky.map((value) => value * factor),
    fluxScaleCgs:
      keepPhysical && spectrum.fluxScaleCgs !== null ? spectrum.fluxScaleCgs / factor : spectrum.fluxScaleCgs,
    fluxUnit:
      keepPhysical && spectrum.fluxScaleCgs !== null ? unitWords(spectrum.fluxScaleCgs / factor) : spectrum.fluxUnit,
  };
}

function unitWords(scale: number): string {
  const scaleCgs = Number(scale.toPrecision(12));
  return scaleCgs === 1 ? 'erg s-1 cm-2 Angstrom-1' : `${scaleCgs.toExponential()} erg s-1 cm-2 Angstrom-1`;
}

/** How a file might write the same spectrum. */
export interface RawFlavour {
  medium: Medium;
  /** Ångströms in one of the file's wavelength units: 1, 10 (nm) or 1e4 (µm). */
  wavelengthUnitAngstrom: number;
  reversed: boolean;
}

/**
 * The spectrum as a file would say it, barycentric, in another medium, unit or pixel order; filler pixels without variance are left out.
 * Reading it back must give the same redshift.
 */
export function toRawSpectrum(spectrum: Spectrum, flavour: RawFlavour): RawSpectrum {
  const order = [...spectrum.flux.keys()].filter((i) => Number.isFinite(spectrum.variance[i]));
  if (flavour.reversed) order.reverse();
  const pick = (values: Float64Array) => Float64Array.from(order, (i) => values[i]);
  const inMedium = (angstrom: number) => (flavour.medium === 'air' ? vacuumToAir(angstrom) : angstrom);
  return {
    extension: 0,
    row: 1,
    name: spectrum.name,
    raDegrees: null,
    decDegrees: null,
    exposureSeconds: null,
    wavelength: Float64Array.from(order, (i) => inMedium(spectrum.wavelength[i]) / flavour.wavelengthUnitAngstrom),
    wavelengthScaleAngstrom: flavour.wavelengthUnitAngstrom,
    flux: pick(spectrum.flux),
    fluxUnit: spectrum.fluxUnit,
    variance: pick(spectrum.variance),
    sky: spectrum.sky && pick(spectrum.sky),
    bad: null,
    resolvingPower: null,
    lsfSigmaAngstrom: pick(spectrum.lsfSigma),
    frame: { medium: flavour.medium, specsys: 'BARYCENT', midExposureJulianDateUtc: null, observatoryMetres: null },
    header: {},
    warnings: [],
  };
}
