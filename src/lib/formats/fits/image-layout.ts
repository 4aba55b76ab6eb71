import { describesSpectralAxis, imageAxis, type AxisCards } from '../axis/spectral-axis';
import type { Hdu } from './read-hdus';

/** How an image holds spectra: `rows` of them, `pixels` long each. */
export interface ImageLayout {
  rows: number;
  pixels: number;
  /** The spectral axis, or null where the wavelengths stand elsewhere. */
  axis: AxisCards | null;
  /** True where the spectral axis is the slower one, so that spectra run down the columns. */
  transposed: boolean;
}

const SPATIAL_TYPE =
  /^(RA|DEC|GLON|GLAT|ELON|ELAT|[XYZ]?LON|[XYZ]?LAT|HPLN|HPLT|OFFSET|ANGLE|SLIT|POS|STOKES|DETX|DETY|PIXEL|X|Y)(-|\b|$)/i;
const SPATIAL_UNIT = /^(deg|arcsec|arcmin|mm|pix|pixel)$/i;

function isSpatial(hdu: Hdu, axis: number): boolean {
  const own = (keyword: string) => (hdu.cards.own(keyword) ? (hdu.cards.text(keyword) ?? '') : '');
  return SPATIAL_TYPE.test(own(`CTYPE${axis}`)) || SPATIAL_UNIT.test(own(`CUNIT${axis}`));
}

/**
 * How the image holds spectra, axes of one pixel left out: one spectrum, or a stack of them with one a row.
 *
 * @returns null where the image is neither: three axes or more, or a second axis that is a place on the sky or slit.
 */
export function imageLayout(hdu: Hdu): ImageLayout | null {
  const axes = hdu.axes.map((length, i) => ({ number: i + 1, length })).filter(({ length }) => length !== 1);
  if (axes.length === 0 || axes.length > 2 || axes.some(({ length }) => length === 0)) return null;
  const described = axes.map(({ number, length }) => {
    const axis = imageAxis(number, length);
    return describesSpectralAxis(hdu.cards, axis) ? axis : null;
  });
  if (axes.length === 1) return { rows: 1, pixels: axes[0].length, axis: described[0], transposed: false };
  const transposed = described[0] === null && described[1] !== null;
  const [spectral, other] = transposed ? [axes[1], axes[0]] : [axes[0], axes[1]];
  if (isSpatial(hdu, other.number) || (described[0] && described[1] && isNamed(hdu, 2))) return null;
  return { rows: other.length, pixels: spectral.length, axis: transposed ? described[1] : described[0], transposed };
}

function isNamed(hdu: Hdu, axis: number): boolean {
  return hdu.cards.own(`CTYPE${axis}`) && !/^linear$/i.test(hdu.cards.text(`CTYPE${axis}`) ?? 'linear');
}

/** Takes spectrum `row` (from 0) out of all pixels of an image. */
export function imageRow(pixels: Float64Array, layout: ImageLayout, row: number): Float64Array {
  if (!layout.transposed) return pixels.subarray(row * layout.pixels, (row + 1) * layout.pixels);
  return Float64Array.from({ length: layout.pixels }, (_, i) => pixels[i * layout.rows + row]);
}
