import { database } from '$lib/server/database/connection';
import { objects } from '$lib/server/storage/storage';
import { readSpectra } from '$lib/formats/read-spectra';
import { writeSpectrumImage } from '$lib/formats/write-spectrum';
import { drawRecipe } from '$lib/science/simulate/draw-recipe';
import { simulateSpectrum } from '$lib/science/simulate/simulate-spectrum';

/**
 * Gives a seeded spectrum bytes in storage: noise with sky lines on an even axis, in the observatory's frame. The name is
 * that of its target.
 */
export async function storePixels(spectrumId: string, seed: number, name: string): Promise<void> {
  const recipe = drawRecipe('empty sky', seed);
  recipe.arms = [
    { start: 3700, end: 9800, axis: 'linear', resolvingPower: 2000, constantFwhm: true, pixelsPerFwhm: 2.3 },
  ];
  recipe.noise = { ...recipe.noise, level: 0.06, skyLines: 30, resampled: false, badRuns: 0 };
  const { spectrum } = simulateSpectrum(recipe, seed);
  const { wavelength, flux, variance, sky, fluxUnit } = spectrum;
  const bytes = writeSpectrumImage({
    ...{ name, flux, fluxUnit, sky, medium: 'vacuum', specsys: 'BARYCENT', raDegrees: 63, decDegrees: -31 },
    ...{ wavelength, error: variance.map(Math.sqrt), dateObs: '2026-11-15T03:00:00', exposureSeconds: 900 },
    observatoryMetres: null,
  });
  const { sha256 } = await objects().put([bytes] as unknown as AsyncIterable<Uint8Array>, 1e8);
  const [{ extension, row }] = readSpectra(bytes, 'stored.fits').spectra;
  await database().query(
    `UPDATE spectra s JOIN files f ON f.id = s.file_id SET f.sha256 = :sha256, f.size_bytes = :size, f.state = 'read',
      s.extension = :extension, s.row_index = :row WHERE s.id = :spectrumId`,
    { replacements: { sha256, size: bytes.length, extension, row, spectrumId } },
  );
}
