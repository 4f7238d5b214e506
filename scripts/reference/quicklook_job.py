#!/usr/bin/env python3
"""The quick look as a careful practitioner would script it today with astropy, SciPy and matplotlib: a
yardstick of speed and an independent check of values. Debian's python3-astropy, -scipy, -matplotlib.

    python3 quicklook_job.py FILE OUT.png

Cut-out in helioprojective coordinates near disk centre: radial field by mu correction, fluxes, current-free
energy with open sides, ceiling, linear force-free energy and currents at three alphas, inversion-line
measures, flux near the strong line, picture. Prints JSON.
"""
import json
import sys

import matplotlib

matplotlib.use('Agg')
import matplotlib.pyplot as plt
import numpy as np
import scipy.fft as sf
from astropy.io import fits
from astropy.wcs import WCS
from scipy import ndimage

MU0 = 4e-7 * np.pi


def read(path):
    with fits.open(path) as hdus:
        hdu = next(h for h in hdus if h.data is not None and h.data.ndim == 2)
        return hdu.data.astype(float), hdu.header


def mu_of(header, shape):
    y, x = np.mgrid[: shape[0], : shape[1]]
    lon, lat = WCS(header).all_pix2world(x, y, 0)
    lon = (lon + 180) % 360 - 180
    rho = np.hypot(lon, lat) * 3600 / header['RSUN_OBS']
    return np.sqrt(np.clip(1 - rho**2, 0.03, None)), abs(header['CDELT1'])


def transform_size(n):
    return sf.next_fast_len(2 * n, real=True)


def energies(b, h):
    """Current-free and wholly open energy [J], field zero outside the map."""
    ny, nx = b.shape
    px, py = transform_size(nx), transform_size(ny)
    x = np.minimum(np.arange(px), px - np.arange(px))[None, :]
    y = np.minimum(np.arange(py), py - np.arange(py))[:, None]
    r = np.hypot(x, y)
    r[0, 0] = 1 / 2.9732
    kernel = sf.rfft2(1 / r).real

    def energy(field):
        spectrum = sf.rfft2(field, s=(py, px))
        weight = np.full(spectrum.shape, 2.0)
        weight[:, 0] = 1
        if px % 2 == 0:
            weight[:, -1] = 1
        total = (weight * kernel * np.abs(spectrum) ** 2).sum() / (px * py)
        return total * (h * 1e6) ** 3 * 1e-8 / (4 * np.pi * MU0)

    return energy(b), energy(np.abs(b))


def linear_energy(b, h, alpha):
    ny, nx = b.shape
    spectrum = np.abs(sf.fft2(b) / b.size) ** 2
    k = np.hypot(2 * np.pi * sf.fftfreq(nx, h)[None, :], 2 * np.pi * sf.fftfreq(ny, h)[:, None])
    k[0, 0] = np.inf
    area = b.size * (h * 1e6) ** 2
    gain = 1 / np.sqrt(k**2 - alpha**2) - 1 / k
    return area * 1e6 * 1e-8 / (2 * MU0) * (spectrum * gain).sum()


def horizontal(b, h):
    ny, nx = b.shape
    px, py = transform_size(nx), transform_size(ny)
    spectrum = sf.rfft2(b, s=(py, px))
    kx = 2 * np.pi * sf.rfftfreq(px, h)[None, :]
    ky = 2 * np.pi * sf.fftfreq(py, h)[:, None]
    k = np.hypot(kx, ky)
    k[0, 0] = 1
    bx = sf.irfft2(-1j * kx / k * spectrum, s=(py, px))[:ny, :nx]
    by = sf.irfft2(-1j * ky / k * spectrum, s=(py, px))[:ny, :nx]
    return np.hypot(bx, by)


def main(path, picture):
    los, header = read(path)
    mu, arcsec = mu_of(header, los.shape)
    b = los / mu
    h = arcsec / header['RSUN_OBS'] * 695.7
    area = h * h / mu * 1e16
    unsigned = (np.abs(b) * area).sum()
    potential, opened = energies(b, h)
    limit = 2 * np.pi / (max(b.shape) * h)
    alphas = [0.0026, 0.0088, min(0.0183, 0.89 * limit)]
    free = [linear_energy(b, h, a) for a in alphas]
    currents = [a * 1e-6 * unsigned / 2 * 1e-8 / MU0 for a in alphas]
    smooth = ndimage.gaussian_filter(b, 1.5 / h / 2.355)
    gy, gx = np.gradient(smooth, h)
    gradient = np.hypot(gx, gy)
    strong = horizontal(b, h) > 150
    figure, axes = plt.subplots(figsize=(12.8, 9), dpi=100)
    image = axes.imshow(b, origin='lower', cmap='RdBu_r', vmin=-1000, vmax=1000)
    lines = axes.contour(np.where(strong, smooth, np.nan), levels=[0], colors='k')
    axes.contour(b * alphas[1] * 1e-10 / MU0 * 1e3, levels=[-10, -5, 5, 10], colors='g', linewidths=0.6)
    weighted = 0.0
    length = 0.0
    for segment in lines.allsegs[0]:
        if len(segment) < 2:
            continue
        step = np.hypot(*np.diff(segment, axis=0).T) * h
        middle = 0.5 * (segment[1:] + segment[:-1])
        slope = ndimage.map_coordinates(gradient, middle[:, ::-1].T, order=1)
        length += step.sum()
        weighted += (step * slope).sum()
    structure = np.ones((3, 3))
    touch = ndimage.binary_dilation(b > 150, structure) & ndimage.binary_dilation(b < -150, structure)
    weight = ndimage.gaussian_filter(touch.astype(float), 15 / h / 2.355)
    near = (weight * np.abs(b)).sum() * h * h * 1e16
    figure.colorbar(image, label='radial field [G]')
    axes.set_title(path.rsplit('/', 1)[-1])
    figure.savefig(picture)
    print(json.dumps({
        'unsigned_flux_Mx': unsigned,
        'potential_energy_J': potential,
        'free_energy_ceiling_J': opened - potential,
        'free_energy_J': free,
        'current_A': currents,
        'inversion_line_length_Mm': length,
        'gradient_weighted_line_length_G': weighted,
        'near_line_flux_Mx': near,
    }))


if __name__ == '__main__':
    main(sys.argv[1], sys.argv[2])
