// The quick look of every real magnetogram, as a Markdown table for the README, beside published ranges.
//   node scripts/real-maps.mjs [FOLDER]      (default SPOTJOULE_REAL_DATA or ../shared/data/real; needs dist/)
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { quickLook } from '../dist/index.js';
import { numberText } from '../dist/render/number-format.js';

const folder =
  process.argv[2] ??
  process.env.SPOTJOULE_REAL_DATA ??
  fileURLToPath(new URL('../../shared/data/real', import.meta.url));

/** File and what must be said about it for one that does not say so itself. */
export const REAL_MAPS = [
  ['los/mdi_fd_M_96m_20101015_000000_TAI_rice.fits', {}],
  ['los/mdi_fd_M_96m_19991211_000000_TAI_rice.fits', {}],
  ['los/mdi_fd_M_20101015_191200_TAI_rice_64x64.fits', {}],
  ['los/mdi_fd_M_20090131_080000_TAI_128x128_oldheader.fits', {}],
  ['los/hmi_blos_ar_cutout_200x200_nowcs.fits', {}],
  [
    'los/hmi_blos_ar_cutout_200x200_nowcs.fits',
    {
      dateIso: '2011-02-14T00:00:00Z',
      at: { lonDeg: 0, latDeg: -20 },
      pixelScaleArcsec: 0.5,
      unit: 'G',
    },
  ],
  ['los/hinode_sotfg_MG4_VI_20110214_030443_1408x704.fits', {}],
  ['los/hinode_sotfg_MG4_VI_20110214_030443_640x300_stalecrpix.fits', {}],
  ['derived/mdi_20101015_ar_cutout_256x256.fits', {}],
  ['derived/mdi_19991211_ar_cutout_256x256.fits', {}],
  ['derived/mdi_20101015_fulldisk_rebin_256x256.fits', {}],
  ['vector/hinode_sotsp_20110304_0647_field-inc-azi_512x512.fits', {}],
  ['other/hmi_continuum_20140301_100x100_crota180.fits', {}],
  ['other/solis_vsm_20110625_2048x2048_truncated.fits', {}],
];

function row(file, reading) {
  const name = file.split('/').at(-1).replace('.fits', '');
  const with_ = Object.keys(reading).length > 0 ? ' (place, date, scale and unit given)' : '';
  try {
    const { document, analysis } = quickLook(join(folder, file), { reading });
    const [region] = document.regions;
    const cell = (key) => {
      const quantity = region.quantities[key];
      return quantity?.value == null ? '' : numberText(quantity.value, quantity.unit);
    };
    const peak = Math.max(
      region.quantities.peak_positive_field.value,
      -region.quantities.peak_negative_field.value,
    );
    const cells = [
      region.center.mu.toFixed(2),
      numberText(analysis.noiseG, 'G'),
      numberText(peak, 'G'),
      cell('unsigned_flux'),
      cell('potential_energy'),
      cell('free_energy'),
      cell('free_energy_ceiling'),
      cell('gradient_weighted_line_length'),
      cell('near_line_flux'),
    ];
    return `| ${name}${with_} | ${document.regions[0].id} | ${cells.join(' | ')} |`;
  } catch (error) {
    return `| ${name}${with_} | refused: ${error.message} ||||||||||`;
  }
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  console.log(
    '| map | region | mu | noise | strongest field | unsigned flux | potential energy | free energy (prior) | ceiling | gradient-weighted line | near-line flux |',
  );
  console.log('|---|---|---|---|---|---|---|---|---|---|---|');
  for (const [file, reading] of REAL_MAPS) console.log(row(file, reading));
}
