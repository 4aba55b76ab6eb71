"""Writes expected-astropy.json: what astropy (with wcslib) reads from the files of this folder.

Run with Debian's python3-astropy: /usr/bin/python3 make-expected.py
"""

import glob
import json
import os
import warnings

import astropy
import numpy as np
from astropy.io import fits
from astropy.wcs import WCS

warnings.simplefilter("ignore")
LIMIT = 400


def plain(values):
    """Numbers as JSON has them: NaN becomes null, logicals 0 and 1."""
    flat = np.ravel(np.asarray(values))[:LIMIT]
    return [None if not np.isfinite(float(value)) else float(value) for value in flat]


def column(hdu, definition):
    data = hdu.data[definition.name]
    entry = {"name": definition.name, "unit": definition.unit}
    if data.dtype.kind in "SU" or (data.dtype.kind == "O" and len(data) and isinstance(data[0], str)):
        entry["text"] = [str(value).strip() for value in data[:LIMIT]]
    elif data.dtype.kind == "O":
        entry["cells"] = [plain(cell) for cell in data[:LIMIT]]
    elif data.dtype.kind in "biuf":
        entry["cells"] = [plain(cell) for cell in data[:LIMIT]]
    if isinstance(hdu, fits.TableHDU) and definition.null:
        # astropy gives 0 for undefined cells of an ASCII table; the standard says that they have no value.
        stored = np.asarray(hdu.data.view(np.ndarray))[definition.name]
        for row, cell in enumerate(stored[:LIMIT]):
            if cell.decode().strip() == definition.null.strip():
                entry["cells"][row] = [None]
    return entry


def describe(path):
    hdus = []
    with fits.open(path, disable_image_compression=True) as file:
        for hdu in file:
            entry = {"kind": type(hdu).__name__, "name": hdu.name if hdu.name != "PRIMARY" else ""}
            if isinstance(hdu, (fits.BinTableHDU, fits.TableHDU)):
                entry["rows"] = len(hdu.data)
                entry["columns"] = [column(hdu, definition) for definition in hdu.columns]
            elif hdu.data is not None:
                entry["axes"] = list(reversed(hdu.data.shape))
                entry["pixels"] = plain(hdu.data)
                entry["sum"] = float(np.nansum(hdu.data.astype(float)))
            hdus.append(entry)
    return hdus


def axes(path):
    """Vacuum wavelengths, metres, at pixels 1, the middle and the last of a bare header, by wcslib's translation.

    One entry for every description of the axis (the primary one and the alternates A to Z).
    """
    with open(path, "rb") as file:
        text = file.read().replace(b"\n", b"").decode("latin1")
    header = fits.Header.fromstring(text)
    count = header["NAXIS1"]
    entries = []
    for key in [" "] + [chr(letter) for letter in range(ord("A"), ord("Z") + 1)]:
        if f"CTYPE1{key.strip()}" not in header:
            continue
        wcs = WCS(header, key=key).sub(["spectral"])
        original = wcs.wcs.ctype[0]
        pixels = [1, count // 2, count]
        try:
            if original[:4] not in ("WAVE", "AWAV"):
                wcs.wcs.sptr("WAVE-???")
            metres = [float(v) for v in wcs.wcs_pix2world(np.array(pixels)[:, None], 1)[:, 0]]
        except Exception as error:
            print(path, key, original, error)
            continue
        entries.append({"key": key.strip(), "ctype": original, "pixels": pixels, "count": count, "metres": metres})
    return entries


os.chdir(os.path.dirname(os.path.abspath(__file__)))
result = {
    "generator": f"astropy {astropy.__version__}",
    "files": {name: describe(name) for name in sorted(glob.glob("*.fits") + glob.glob("*.fits.gz")) if not name.startswith("compressed-")},
    "axes": {name: axes(name) for name in sorted(glob.glob("*.hdr"))},
}
with open("expected-astropy.json", "w") as file:
    json.dump(result, file, indent=1)
    file.write("\n")
