#!/usr/bin/python3
"""Remakes fixtures/fits/ bit for bit: small FITS files, one per case, and expected.json with the
pixel values as astropy and CFITSIO (funpack) read them.

Needs Debian's python3-astropy (5.2) and libcfitsio-bin (4.2: fpack, funpack, imcopy).
Run from anywhere:  /usr/bin/python3 scripts/reference/make-fits-fixtures.py
"""
import base64
import gzip
import hashlib
import json
import os
import re
import shutil
import struct
import subprocess
import sys
import tempfile
import warnings
import zlib

import astropy
import numpy as np
from astropy.io import fits

warnings.simplefilter('ignore')
HERE = os.path.dirname(os.path.abspath(__file__))
OUT = os.path.join(HERE, '..', '..', 'fixtures', 'fits')
NX, NY = 24, 18
WORK = tempfile.mkdtemp()
EXPECTED = {}


def picture(seed, amplitude=1000.0, noise=5.0, nx=NX, ny=NY):
    """Two smooth spots of opposite sign and some noise."""
    rng = np.random.default_rng(seed)
    y, x = np.mgrid[0:ny, 0:nx]
    spot = lambda cx, cy, s: np.exp(-((x - cx * nx) ** 2 + (y - cy * ny) ** 2) / (2 * (s * nx) ** 2))
    return amplitude * (spot(0.3, 0.5, 0.1) - spot(0.65, 0.45, 0.12)) + noise * rng.standard_normal((ny, nx))


def integers(seed, dtype, amplitude=1000.0, noise=5.0):
    return np.rint(picture(seed, amplitude, noise)).astype(dtype)


def floats(seed, dtype=np.float32, nan=True):
    data = picture(seed, 500.0, 12.0).astype(dtype)
    if nan:
        data[0:3, 0:4] = np.nan
        data[9, 11] = np.nan
    return data


def out_path(name):
    return os.path.join(OUT, name)


def write(name, hdus):
    fits.HDUList(hdus).writeto(out_path(name), overwrite=True, output_verify='silentfix')


def primary(data, **cards):
    hdu = fits.PrimaryHDU(data)
    for key, value in cards.items():
        hdu.header[key] = value
    return hdu


def run(*args):
    done = subprocess.run(args, cwd=WORK, capture_output=True, text=True)
    if done.returncode != 0:
        raise RuntimeError(f'{args}: {done.stdout}{done.stderr}')


def values_of(data):
    """Pixels as little-endian float64 with one NaN pattern (all first bytes, then all second bytes and
    so on, deflated, base64; a hash of the bytes where there are many), with a summary."""
    flat = np.ascontiguousarray(data, dtype='<f8')
    flat = np.where(np.isnan(flat), np.nan, flat).astype('<f8')
    good = flat[~np.isnan(flat)]
    planes = flat.view('u1').reshape(-1, 8).T.tobytes()
    small = flat.size <= 2000
    return {
        'shape': [int(n) for n in reversed(data.shape)],
        'min': float(good.min()), 'max': float(good.max()), 'sum': float(good.sum()),
        'missing': int(np.isnan(flat).sum()),
        'values' if small else 'sha256': (
            base64.b64encode(zlib.compress(planes, 9)).decode() if small else hashlib.sha256(flat.tobytes()).hexdigest()),
    }


def read_astropy(path, hdu):
    with fits.open(path, memmap=False) as f:
        data = f[hdu].data
        return np.array(data, dtype=np.float64)


def read_funpack(path, hdu):
    """Unpacked by CFITSIO, then the plain result read by astropy."""
    plain = os.path.join(WORK, 'plain.fits')
    if os.path.exists(plain):
        os.remove(plain)
    run('funpack', '-C', '-O', plain, os.path.abspath(path))
    with fits.open(plain, memmap=False) as f:
        wanted = [h for h in f if h.data is not None and h.is_image]
        return np.array(wanted[0].data, dtype=np.float64)


def expect(name, hdu, readers=('astropy',), plane=None, note='', blank_from=np.inf):
    path = out_path(name)
    read = {'astropy': read_astropy, 'funpack': read_funpack}
    results = [read[reader](path, hdu) for reader in readers]
    data = results[0]
    for other in results[1:]:
        # astropy 5.2 overlooks a ZBLANK keyword and gives numbers there; the rest must agree
        seen = np.where(np.isnan(data), np.nan, other)
        if not np.array_equal(data, seen, equal_nan=True):
            raise RuntimeError(f'{name}: {readers} differ by up to {np.nanmax(np.abs(data - other))}')
        if not np.array_equal(seen, other, equal_nan=True):
            note = 'undefined pixels as funpack has them; astropy 5.2 overlooks ZBLANK here'
    data = np.where(data >= blank_from, np.nan, data)
    if plane is not None:
        data = data.reshape(-1, *data.shape[-2:])[plane]
    while data.ndim > 2:
        data = data[0]
    EXPECTED.setdefault(name, []).append(
        {'hdu': hdu, 'plane': plane, 'read_by': '+'.join(readers), 'note': note, **values_of(data)})


# ---- plain images -------------------------------------------------------------------------------

def plain_images():
    """Every BITPIX, the unsigned conventions, scaling and BLANK, as extensions."""
    ints = {
        'uint8': integers(1, np.int64, 100, 3).clip(-127, 127) + 128,
        'int16': integers(2, np.int16), 'int32': integers(3, np.int32, 1e9, 5),
        'int64': integers(4, np.int64, 4e15, 1e9),
        'uint16': (integers(5, np.int64) + 30000).astype(np.uint16),
        'uint32': (integers(6, np.int64, 1e9, 5) + 3_000_000_000).astype(np.uint32),
        'uint64': (integers(7, np.int64, 1e15, 9) + 2**52).astype(np.uint64),
        'int8': integers(8, np.int8, 100, 3),
    }
    ints['uint8'] = ints['uint8'].astype(np.uint8)
    types = {**ints, 'float32': floats(9, np.float32), 'float64': floats(10, np.float64)}
    unsigned = ('uint16', 'uint32', 'uint64', 'int8')
    for file, names in (
        ('plain-types.fits', [name for name in types if name not in unsigned]),
        ('plain-unsigned.fits', unsigned),
    ):
        hdus = [fits.PrimaryHDU(), *(fits.ImageHDU(types[name], name=name) for name in names)]
        write(file, hdus)
        for index in range(1, len(hdus)):
            expect(file, index, note=hdus[index].name)

    # scaled integers with blanks: stored numbers written as they are
    scaled = [fits.PrimaryHDU()]
    for data, blank, scale, zero in (
        (integers(11, np.int16), -32768, 0.1, 0.0),
        (integers(12, np.int32, 1e5, 500), -2147483648, 0.01, 5.0),
        (integers(13, np.int64, 100, 3).clip(-120, 127).astype(np.int64) + 128, 255, 2.0, -256.0),
    ):
        data = data.astype(np.uint8) if blank == 255 else data
        data[2, 3:9] = blank
        hdu = fits.ImageHDU(data)
        hdu.header['BSCALE'], hdu.header['BZERO'], hdu.header['BLANK'] = scale, zero, blank
        scaled.append(hdu)
    write('plain-scaled-blank.fits', scaled)
    for index in range(1, 4):
        expect('plain-scaled-blank.fits', index)

    write('plain-float-with-blank.fits', [primary(floats(14), BLANK=-32768)])
    expect('plain-float-with-blank.fits', 0, note='integer BLANK in a float image has no meaning')
    cube = np.stack([floats(20 + k, nan=k == 1) for k in range(3)])
    write('plain-cube.fits', [primary(cube)])
    for plane in range(3):
        expect('plain-cube.fits', 0, plane=plane)
    write('plain-one-plane.fits', [primary(floats(23)[None, :, :], BUNIT='Gauss')])
    expect('plain-one-plane.fits', 0)

    whole = open(out_path('plain-one-plane.fits'), 'rb').read()
    with open(out_path('plain-gzipped.fits.gz'), 'wb') as f:
        f.write(gzip.compress(whole, 9, mtime=0))
    EXPECTED['plain-gzipped.fits.gz'] = EXPECTED['plain-one-plane.fits']

    table = fits.BinTableHDU.from_columns([
        fits.Column('N', 'J', array=np.arange(5)), fits.Column('TEXT', '8A', array=['a', 'b', 'c', 'd', 'e'])])
    ascii_table = fits.TableHDU.from_columns([fits.Column('X', 'F8.3', array=np.arange(3) / 4)])
    write('plain-after-tables.fits', [fits.PrimaryHDU(), table, ascii_table, fits.ImageHDU(floats(24), name='FIELD')])
    expect('plain-after-tables.fits', 3)


def header_cards():
    """Long strings, HIERARCH, every kind of value, as astropy writes and reads them."""
    header = fits.Header()
    header['OBSERVER'] = 'station on Marrow Hill'
    header['QUOTED'] = "it's the 'MH-1' region"
    header['LONGTEXT'] = ('A long string about region MH-2, ' * 7 + "it's with an & inside", 'kept by CONTINUE')
    header['HIERARCH MARROW HILL FILTER WIDTH'] = (0.125, 'nm')
    header['HIERARCH lower case name'] = 'text'
    header['YES'], header['NO'] = True, False
    header['WHOLE'], header['LARGE'] = -42, 9007199254740993
    header['REAL'], header['TINY'] = 3.25, 1.5e-300
    header['EMPTY'] = ''
    header['UNDEF'] = None
    header['COMMENT'] = 'a comment'
    header['HISTORY'] = 'made by a script'
    write('header-cards.fits', [fits.PrimaryHDU(np.arange(12, dtype=np.int16).reshape(3, 4), header)])
    with fits.open(out_path('header-cards.fits')) as f:
        cards = []
        for card in f[0].header.cards:
            value = card.value
            if isinstance(value, fits.card.Undefined):
                value = None
            if isinstance(value, int) and abs(value) > 2**53:
                value = str(value)
            cards.append([card.keyword.upper(), value, card.comment])
    EXPECTED['header-cards.fits'] = {'cards': cards}


def odd_headers():
    """Breaks of the rules whose meaning is clear, made by hand."""
    def block(cards):
        text = ''.join(card.ljust(80) for card in cards)
        return text.ljust(-(-len(text) // 2880) * 2880).encode('latin-1')

    data = np.arange(30, dtype='>i2').reshape(5, 6)
    cards = [
        'SIMPLE  =                    T', 'BITPIX  =                   16', 'NAXIS   =                    2',
        'NAXIS1  =                    6', 'NAXIS2  =                    5', "XCEN    = '      223.202'",
        "TIME_D$O= '12:00:00'", 'ENDSTATE=                    7', 'exptime =                 2.5D1 / lower case, D exponent',
        'CDELT1  = 0.5', 'CDELT1  = 0.6', 'NOEQUAL 12', "OPEN    = 'no closing quote", 'TIGHT   =5',
        'WORD    = Marrow', 'NOTANUM = NaN', "CONTINUE  'continues nothing'", 'BLANKVAL=', 'DUR=1.5', 'END',
    ]
    body = data.tobytes()
    content = block(cards) + body.ljust(2880, b'\0')
    dump = block(["XTENSION= 'DUMP    '", 'BITPIX  =                    8', 'NAXIS   =                    1',
                  'NAXIS1  =                  944', 'PCOUNT  =                    0', 'GCOUNT  =                    1', 'END'])
    content += dump + bytes(range(236)) * 4 + bytes(2880 - 944)
    with open(out_path('odd-header.fits'), 'wb') as f:
        f.write(content)
    expect('odd-header.fits', 0)
    with open(out_path('odd-short-padding.fits'), 'wb') as f:
        f.write(block(cards) + body)
    EXPECTED['odd-short-padding.fits'] = EXPECTED['odd-header.fits']


# ---- compressed images --------------------------------------------------------------------------

BOTH = ('funpack', 'astropy')


def packed(name, data, *options, header=None, readers=BOTH):
    """Compressed by CFITSIO's fpack."""
    plain = os.path.join(WORK, 'in.fits')
    hdu = fits.PrimaryHDU(data)
    for key, value in (header or {}).items():
        hdu.header[key] = value
    hdu.writeto(plain, overwrite=True)
    path = os.path.join(WORK, 'out.fits')
    if os.path.exists(path):
        os.remove(path)
    run('fpack', '-C', *options, '-O', path, plain)
    shutil.copyfile(path, out_path(name))
    if readers:
        expect(name, 1, readers)


def squeezed(name, data, readers=BOTH, **options):
    """Compressed by astropy."""
    hdu = fits.CompImageHDU(data, **options)
    fits.HDUList([fits.PrimaryHDU(), hdu]).writeto(out_path(name), overwrite=True)
    expect(name, 1, readers)


def copied(name, data, qualifier, readers=BOTH):
    """Compressed by CFITSIO's imcopy with its compression qualifier."""
    plain = os.path.join(WORK, 'in.fits')
    fits.PrimaryHDU(data).writeto(plain, overwrite=True)
    path = os.path.join(WORK, 'out.fits')
    if os.path.exists(path):
        os.remove(path)
    run('imcopy', plain, f'{path}[compress {qualifier}]')
    shutil.copyfile(path, out_path(name))
    expect(name, 1, readers)


def integer_codecs():
    byte = (integers(31, np.int64, 100, 3).clip(-127, 127) + 128).astype(np.uint8)
    short = integers(32, np.int16, 3000, 8)
    word = integers(33, np.int32, 2e9, 1e5)
    packed('rice-int8-rows.fits', byte, '-r')
    packed('rice-int16-rows.fits', short, '-r')
    packed('rice-int32-whole.fits', word, '-r', '-w')
    packed('rice-int32-tiles.fits', integers(34, np.int32, 2e4, 30), '-r', '-t', '10,7')
    squeezed('rice-int32-block16.fits', integers(35, np.int32, 2e4, 30), compression_type='RICE_1', tile_size=(24, 5))
    extremes = word.copy()
    extremes[::2, ::3] = -2147483647
    extremes[1::2, ::2] = 2147483647
    packed('rice-int32-extremes.fits', extremes, '-r', '-t', '24,6')
    flat = np.full((NY, NX), 77, np.int32)
    flat[10:, 5:] = -123456
    packed('rice-int32-flat.fits', flat, '-r', '-t', '24,6')
    packed('rice-uint16.fits', (integers(36, np.int64) + 40000).astype(np.uint16), '-r')
    for kind, flag in (('gzip1', '-g1'), ('gzip2', '-g2')):
        packed(f'{kind}-int16.fits', short, flag, '-t', '10,7')
        packed(f'{kind}-int32.fits', word, flag, '-w')
    packed('gzip2-int8.fits', byte, '-g2')
    packed('nocompress-int16.fits', short, '-d', '-t', '10,7', readers=('funpack',))
    packed('hcompress-int16.fits', short, '-h', '-w')
    packed('hcompress-int32.fits', word // 64, '-h', '-t', '13,9')
    packed('hcompress-int16-lossy.fits', short, '-h', '-w', '-s', '-20')
    copied('hcompress-int16-smooth.fits', short, 'HSCOMPRESS 24,18; s -20')
    copied('hcompress-int32-smooth.fits', integers(38, np.int32, 1e6, 900), 'HSCOMPRESS 24,18; s -900')
    mask = np.zeros((NY, NX), np.int16)
    mask[3:9, 4:20] = 1
    mask[5:7, 6:9] = 300
    mask[12, ::2] = 30000
    packed('plio-int16.fits', mask, '-p')
    packed('plio-int16-whole.fits', mask + np.arange(NX, dtype=np.int16), '-p', '-w')
    packed('plio-int8.fits', mask.clip(0, 200).astype(np.uint8), '-p')
    squeezed('plio-int32.fits', mask.astype(np.int32) * 500, compression_type='PLIO_1')
    cube = np.stack([integers(40 + k, np.int16) for k in range(5)])
    packed('rice-cube-deep-tiles.fits', cube, '-r', '-t', '10,7,2', readers=())
    for plane in range(5):
        expect('rice-cube-deep-tiles.fits', 1, BOTH, plane=plane)


def float_codecs():
    data = floats(51)
    zeros = data.copy()
    zeros[4:8, 2:20:3] = 0.0
    packed('rice-float32-no-dither.fits', data, '-r', '-q0', '8')
    packed('rice-float32-dither1.fits', data, '-r', '-q17', '8')
    # no undefined pixels where tiles are narrower than the picture: funpack 1.7 misplaces pixels there
    packed('rice-float32-dither1-late-seed.fits', floats(55, nan=False), '-r', '-q9995', '8', '-t', '10,7')
    packed('rice-float32-dither2.fits', zeros, '-r', '-qz42', '8')
    packed('rice-float32-dither2-strips.fits', zeros, '-r', '-qz4242', '8', '-t', '24,5')
    packed('gzip1-float32-dither1.fits', data, '-g1', '-q17', '8')
    packed('gzip2-float32-dither2.fits', np.nan_to_num(zeros), '-g2', '-qz9999', '8', '-t', '10,7')
    packed('hcompress-float32-dither1.fits', floats(52, nan=False), '-h', '-q5', '8', '-w')
    packed('nocompress-float32.fits', data, '-d', '-q17', '8', readers=('funpack',))
    packed('gzip1-float32-lossless.fits', data, '-g1', '-q', '0')
    packed('gzip2-float32-lossless.fits', data, '-g2', '-q', '0', '-t', '24,5')
    double = floats(53, np.float64)
    packed('gzip1-float64-lossless.fits', double, '-g1', '-q', '0', '-w')
    packed('gzip2-float64-lossless.fits', double, '-g2', '-q', '0')
    packed('rice-float64-dither1.fits', double, '-r', '-q3', '8')
    # tiles that cannot be quantised go to GZIP_COMPRESSED_DATA
    hard = data.copy()
    hard[6:8] = (10.0 ** np.linspace(-30, 30, 2 * NX).reshape(2, NX)).astype(np.float32)
    packed('rice-float32-fallback-gzip.fits', hard, '-r', '-q17', '8')
    with fits.open(out_path('rice-float32-fallback-gzip.fits'), disable_image_compression=True) as f:
        assert any(len(row) for row in f[1].data['GZIP_COMPRESSED_DATA']), 'no tile fell back'
    # a long dither series: more pixels in one tile than random numbers
    big = np.tile(floats(54, nan=False), (6, 5))
    packed('rice-float32-dither1-long.fits', big, '-r', '-q77', '1', '-w')


# ---- compressed tables rearranged by hand, then read by CFITSIO and astropy ----------------------

def table_parts(name):
    with fits.open(out_path(name), disable_image_compression=True) as f:
        rows = [bytes(np.asarray(row).astype(np.uint8)) for row in f[1].data['COMPRESSED_DATA']]
        return rows, f[1].header.copy()


def build(name, header, columns, rows, cards=()):
    """A table of (TTYPE, TFORM) columns; each row holds bytes (variable), or a packed number."""
    heap, body = b'', b''
    for row in rows:
        for (_, form), cell in zip(columns, row):
            if form[1] in 'PQ':
                width = {'B': 1, 'E': 4, 'D': 8, 'I': 2, 'J': 4}[form[2]]
                body += struct.pack('>qq' if form[1] == 'Q' else '>ii', len(cell) // width, len(heap) if cell else 0)
                heap += cell
            else:
                body += struct.pack({'J': '>i', 'D': '>d'}[form[-1]], cell)
    keep = [c for c in header.cards if not re.match(
        r'(XTENSION|BITPIX|NAXIS|PCOUNT|GCOUNT|TFIELDS|TTYPE|TFORM|EXTNAME|THEAP)', c.keyword)]
    new = fits.Header()
    new['XTENSION'], new['BITPIX'], new['NAXIS'] = 'BINTABLE', 8, 2
    new['NAXIS1'], new['NAXIS2'] = len(body) // len(rows), len(rows)
    new['PCOUNT'], new['GCOUNT'], new['TFIELDS'] = len(heap), 1, len(columns)
    for n, (label, form) in enumerate(columns, 1):
        new[f'TTYPE{n}'], new[f'TFORM{n}'] = label, form
    for card in keep:
        new.append(card)
    for key, value in cards:
        new[key] = value
    data = body + heap
    with open(out_path(name), 'wb') as f:
        f.write(fits.PrimaryHDU().header.tostring().encode())
        f.write(new.tostring().encode())
        f.write(data.ljust(-(-len(data) // 2880) * 2880, b'\0'))


def rearranged():
    rows, header = table_parts('rice-int32-tiles.fits')
    build('rice-wide-descriptors.fits', header, [('COMPRESSED_DATA', '1QB')], [[r] for r in rows])
    expect('rice-wide-descriptors.fits', 1, BOTH)

    blank = integers(61, np.int32, 2e4, 30)
    blank[0:3, :5] = -2147483648
    packed('rice-int32-plain-blank.fits', blank, '-r', header={'BSCALE': 0.01, 'BZERO': 0.0, 'BLANK': -2147483648}, readers=())
    # as MDI's archive writes it: BLANK and no ZBLANK
    rows, header = table_parts('rice-int32-plain-blank.fits')
    header.remove('ZBLANK', ignore_missing=True)
    build('rice-int32-plain-blank.fits', header, [('COMPRESSED_DATA', '1PB')], [[r] for r in rows],
          [('BLANK', -2147483648), ('BSCALE', 0.01), ('BZERO', 0.0)])
    expect('rice-int32-plain-blank.fits', 1, ('funpack',), note='plain BLANK, no ZBLANK')
    header.remove('BLANK')
    build('rice-int32-zblank-keyword.fits', header, [('COMPRESSED_DATA', '1PB')], [[r] for r in rows],
          [('ZBLANK', -2147483648), ('BSCALE', 0.01), ('BZERO', 0.0)])
    expect('rice-int32-zblank-keyword.fits', 1, ('astropy',))

    # integers with a blank value per tile (70000 and up). funpack's plain output has no BLANK to put
    # there and keeps the stored numbers, so those are made NaN here by the rule of the standard, 10.1.3
    table = []
    for k in range(NY):
        stored = integers(64, np.int32)[k].astype('>i4')
        stored[k % NX] = stored[(k + 7) % NX] = 70000 + k
        table.append([gzip.compress(stored.tobytes(), 9, mtime=0), 70000 + k])
    _, plain_header = table_parts('gzip1-int32.fits')
    for n in (1, 2):
        plain_header[f'ZTILE{n}'] = (NX, 1)[n - 1]
    columns = [('COMPRESSED_DATA', '1PB'), ('ZBLANK', '1J')]
    build('gzip1-int32-zblank-column.fits', plain_header, columns, table)
    expect('gzip1-int32-zblank-column.fits', 1, ('funpack',), blank_from=70000, note='blanks by the rule of the standard')

    # per-tile ZBLANK column: every tile with its own blank value (float image)
    rng = np.random.default_rng(62)
    table = []
    for k in range(NY):
        stored = rng.integers(-400, 400, NX).astype('>i4')
        stored[k % NX] = stored[(k + 7) % NX] = 5000 + k
        data = gzip.compress(stored.tobytes(), 9, mtime=0)
        table.append([data, 0.25 + k / 64, -3.5 * k, 5000 + k])
    _, header = table_parts('gzip1-float32-dither1.fits')
    header.remove('ZBLANK', ignore_missing=True)
    header['ZQUANTIZ'], header['ZDITHER0'] = 'SUBTRACTIVE_DITHER_1', 1234
    columns = [('COMPRESSED_DATA', '1PB'), ('ZSCALE', '1D'), ('ZZERO', '1D'), ('ZBLANK', '1J')]
    build('gzip1-float32-zblank-column.fits', header, columns, table)
    expect('gzip1-float32-zblank-column.fits', 1, ('funpack',))
    # ZSCALE and ZZERO as keywords (Standard 4.0, 10.1.3), which CFITSIO 4.2 does not heed but astropy does
    rows, header = table_parts('rice-float32-dither1-late-seed.fits')
    build('rice-float32-scale-keywords.fits', header, columns[:1], [[r] for r in rows], [('ZSCALE', 0.5), ('ZZERO', 12.25)])
    expect('rice-float32-scale-keywords.fits', 1, ('astropy',))

    # UNCOMPRESSED_DATA for some tiles
    image = integers(63, np.int16, 3000, 8)
    packed('rice-int16-uncompressed-tiles.fits', image, '-r', readers=())
    rows, header = table_parts('rice-int16-uncompressed-tiles.fits')
    cells = [[b'', image[k].astype('>i2').tobytes()] if k % 3 == 1 else [rows[k], b''] for k in range(NY)]
    build('rice-int16-uncompressed-tiles.fits', header, [('COMPRESSED_DATA', '1PB'), ('UNCOMPRESSED_DATA', '1PI')], cells)
    expect('rice-int16-uncompressed-tiles.fits', 1, ('funpack',))


def strict_sizes():
    total = 0
    for name in sorted(os.listdir(OUT)):
        size = os.path.getsize(out_path(name))
        total += size
        assert size < 50_000 or name == 'expected.json', (name, size)
    print(f'{len(EXPECTED)} cases, {total} bytes in all')


def main():
    os.makedirs(OUT, exist_ok=True)
    for name in os.listdir(OUT):
        if name != 'README.md':
            os.remove(out_path(name))
    for step in (plain_images, header_cards, odd_headers, integer_codecs, float_codecs, rearranged):
        step()
    made = {'astropy': astropy.__version__, 'numpy': np.__version__, 'fpack': 'CFITSIO 4.2.0'}
    with open(out_path('expected.json'), 'w') as f:
        json.dump({'made_with': made, 'cases': EXPECTED}, f, indent=0, sort_keys=True)
        f.write('\n')
    strict_sizes()
    shutil.rmtree(WORK)


if __name__ == '__main__':
    sys.exit(main())
