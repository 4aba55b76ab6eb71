"""Writes compressed-*.fits and expected-compressed.json: tile-compressed images as astropy (cfitsio) packs and unpacks them.

Run with Debian's python3-astropy: /usr/bin/python3 make-compressed.py
"""

import json
import os
import warnings

import astropy
import numpy as np
from astropy.io import fits

warnings.simplefilter("ignore")
os.chdir(os.path.dirname(os.path.abspath(__file__)))
random = np.random.default_rng(20261201)
stack = (10 + random.normal(size=(3, 240))).astype(np.float32)
stack[1, 17] = np.nan
stack[2, 5:9] = 0
counts = random.integers(-30000, 30000, size=(3, 240)).astype(np.int16)
quiet = (1000 + random.integers(0, 9, size=(3, 240))).astype(np.int32)

cases = {
    "compressed-rice-int16.fits": (counts, {"compression_type": "RICE_1"}),
    "compressed-rice-int32.fits": (quiet, {"compression_type": "RICE_1"}),
    "compressed-rice-tiles.fits": (quiet, {"compression_type": "RICE_1", "tile_size": (100, 2)}),
    "compressed-gzip1-int32.fits": (quiet, {"compression_type": "GZIP_1"}),
    "compressed-gzip2-int16.fits": (counts, {"compression_type": "GZIP_2"}),
    "compressed-gzip1-float.fits": (stack, {"compression_type": "GZIP_1", "quantize_level": 0.0}),
    "compressed-gzip2-float.fits": (stack, {"compression_type": "GZIP_2", "quantize_level": 0.0}),
    "compressed-rice-plain.fits": (stack, {"compression_type": "RICE_1", "quantize_method": -1}),
    "compressed-rice-dither1.fits": (
        stack,
        {"compression_type": "RICE_1", "quantize_method": 1, "dither_seed": 9999},
    ),
    "compressed-rice-dither2.fits": (
        stack,
        {"compression_type": "RICE_1", "quantize_method": 2, "dither_seed": 42},
    ),
    "compressed-gzip2-dither1.fits": (
        stack,
        {"compression_type": "GZIP_2", "quantize_method": 1, "dither_seed": 7},
    ),
}

expected = {"generator": f"astropy {astropy.__version__}", "files": {}}
for name, (data, options) in cases.items():
    hdu = fits.CompImageHDU(data, name="FLUX", **options)
    for key, value in [("CTYPE1", "WAVE"), ("CUNIT1", "Angstrom"), ("CRPIX1", 1.0), ("CRVAL1", 5000.0), ("CDELT1", 2.0)]:
        hdu.header[key] = value
    fits.HDUList([fits.PrimaryHDU(), hdu]).writeto(name, overwrite=True)
    with fits.open(name) as file:
        values = file[1].data.astype(float)
    expected["files"][name] = [[None if np.isnan(v) else float(v) for v in row] for row in values]
with open("expected-compressed.json", "w") as file:
    json.dump(expected, file)
    file.write("\n")
