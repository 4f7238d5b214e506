// Run as a process of its own: writes the PNG of a filled picture to the file named.
import { writeFileSync } from 'node:fs';
import { renderRegionPicture } from '../../src/render/region-picture.js';
import { BIPOLE_SPOTS, filledPicture } from './sample-patch.js';

const picture = filledPicture({ nx: 96, ny: 96, spots: BIPOLE_SPOTS });
writeFileSync(process.argv[2], await renderRegionPicture(picture));
