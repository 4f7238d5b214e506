#!/usr/bin/env python3
"""Writes the small Marrow Hill cut-out in other encodings, with astropy and CFITSIO's fpack, for the test
that the same map in every encoding gives the same figures.

    python3 scripts/reference/make-encodings.py      (needs Debian's python3-astropy and libcfitsio-bin)
"""
import gzip
import os
import pathlib
import subprocess
import tempfile

import numpy as np
from astropy.io import fits

HERE = pathlib.Path(__file__).resolve().parents[2] / 'fixtures' / 'marrow-hill'
SOURCE = HERE / 'mh-1-20310514-small.fits'
OUT = HERE / 'encodings'
KEEP_OUT = ('SIMPLE', 'BITPIX', 'NAXIS', 'NAXIS1', 'NAXIS2', 'BSCALE', 'BZERO', 'BLANK', 'CHECKSUM', 'DATASUM', 'EXTEND')


def plain_header(source):
    header = source.copy()
    for keyword in KEEP_OUT:
        header.remove(keyword, ignore_missing=True)
    return header


def write(name, data, header, scaling=None):
    hdu = fits.PrimaryHDU(data, plain_header(header))
    for keyword, value in (scaling or {}).items():
        hdu.header[keyword] = value
    hdu.writeto(OUT / name, overwrite=True, output_verify='exception')


def fpack(name, source, *options):
    with tempfile.TemporaryDirectory() as folder:
        copy = pathlib.Path(folder) / 'map.fits'
        copy.write_bytes(pathlib.Path(source).read_bytes())
        subprocess.run(['fpack', *options, copy], check=True)
        (OUT / name).write_bytes((pathlib.Path(folder) / 'map.fits.fz').read_bytes())


def main():
    OUT.mkdir(exist_ok=True)
    with fits.open(SOURCE, do_not_scale_image_data=True) as hdus:
        stored = hdus[0].data.copy()
        header = hdus[0].header.copy()
    values = stored * 0.1
    (OUT / 'gzip.fits.gz').write_bytes(gzip.compress(SOURCE.read_bytes(), 9, mtime=0))
    write('float32.fits', values.astype('f4'), header)
    write('float64.fits', values, header)
    write('int32.fits', stored.astype('i4'), header, {'BSCALE': 0.1, 'BZERO': 0.0})
    empty = fits.PrimaryHDU()
    image = fits.ImageHDU(stored, plain_header(header), name='FIELD')
    image.header['BSCALE'] = 0.1
    image.header['BZERO'] = 0.0
    fits.HDUList([empty, image]).writeto(OUT / 'extension.fits', overwrite=True)
    fpack('rice.fits', SOURCE, '-r')
    fpack('rice-whole-image.fits', SOURCE, '-r', '-w')
    fpack('gzip-1.fits', SOURCE, '-g1')
    fpack('gzip-2.fits', SOURCE, '-g2')
    fpack('hcompress.fits', SOURCE, '-h')
    fpack('rice-int32.fits', OUT / 'int32.fits', '-r')
    fpack('rice-float-quantised.fits', OUT / 'float32.fits', '-r', '-q', '64', '-qz', '7')
    with tempfile.TemporaryDirectory() as folder:
        shifted = pathlib.Path(folder) / 'shifted.fits'
        hdu = fits.PrimaryHDU(stored.astype('i4') + 32768, plain_header(header))
        hdu.header['BSCALE'] = 0.1
        hdu.header['BZERO'] = -3276.8
        hdu.writeto(shifted)
        fpack('plio-int32.fits', shifted, '-p')
    for name in sorted(os.listdir(OUT)):
        print(name, (OUT / name).stat().st_size)


if __name__ == '__main__':
    main()
