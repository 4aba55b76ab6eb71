#!/usr/bin/python3
"""Trims the public survey files to what the tests need: HDU 0 and, of HDU 1, wavelength, flux, inverse variance,
line-spread width and sky. The survey's own model, redshift and line measurements (a column of HDU 1, HDU 2 and later) are left
out, except in one file that is kept whole to show that they are not read.

Usage: trim.py FOLDER_OF_ORIGINALS   (needs python3-astropy)
"""
import csv
import gzip
import io
import os
import sys

from astropy.io import fits

source = sys.argv[1]
here = os.path.dirname(os.path.abspath(__file__))
KEPT = ["loglam", "flux", "ivar", "wdisp", "sky"]
WHOLE = "spec-1026-52558-0067.fits"


def gz(hdus, name):
    buffer = io.BytesIO()
    hdus.writeto(buffer)
    with open(os.path.join(here, name), "wb") as out:
        with gzip.GzipFile(fileobj=out, mode="wb", compresslevel=9, mtime=0) as packed:
            packed.write(buffer.getvalue())


with open(os.path.join(source, "real-spectra.csv")) as table:
    rows = list(csv.DictReader(table))
fields = ["file", "kind", "publishedRedshift", "redshiftError", "zwarning", "source", "obtainedFrom", "licence", "sha256"]
with open(os.path.join(here, "real-spectra.csv"), "w", newline="") as out:
    writer = csv.DictWriter(out, fields, extrasaction="ignore", lineterminator="\n")
    writer.writeheader()
    writer.writerows(rows)
for row in rows:
    with fits.open(os.path.join(source, row["file"])) as original:
        columns = [column for column in original[1].columns if column.name.lower() in KEPT]
        table = fits.BinTableHDU.from_columns(columns)
        name = row["file"].replace(".fits.gz", ".fits") + ".gz"
        gz(fits.HDUList([fits.PrimaryHDU(header=original[0].header), table]), name)
        if row["file"] == WHOLE:
            gz(fits.HDUList([hdu.copy() for hdu in original[:3]]), "whole-" + name)
