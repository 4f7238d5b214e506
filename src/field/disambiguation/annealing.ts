import { type Lattice, pixelEnergy, turnPixel } from './lattice.js';

/** Temperatures are in units of each pixel's own transverse field, which sets the size of its changes. */
export interface Schedule {
  readonly from: number;
  readonly to: number;
  readonly sweeps: number;
}

/**
 * Simulated annealing of single pixels (Metropolis et al. 1953; for the ambiguity Metcalf 1994, Sol.
 * Phys. 155, 235): each sweep offers every pixel its other reading and takes it with probability
 * exp(-change / temperature), while the temperature falls in equal ratios. Only the pixel's own and
 * its four neighbours' energies are worked out anew.
 */
export function annealPixels(
  lattice: Lattice,
  { from, to, sweeps }: Schedule,
  random: () => number,
): void {
  const { pixels, width, energy, transverseG } = lattice;
  const ratio = sweeps > 1 ? (to / from) ** (1 / (sweeps - 1)) : 1;
  let temperature = from;
  for (let sweep = 0; sweep < sweeps; sweep++, temperature *= ratio) {
    for (let k = 0; k < pixels.length; k++) {
      const i = pixels[k];
      turnPixel(lattice, i);
      const here = pixelEnergy(lattice, i);
      const east = pixelEnergy(lattice, i + 1);
      const west = pixelEnergy(lattice, i - 1);
      const north = pixelEnergy(lattice, i + width);
      const south = pixelEnergy(lattice, i - width);
      const before =
        energy[i] + energy[i + 1] + energy[i - 1] + energy[i + width] + energy[i - width];
      const change = here + east + west + north + south - before;
      if (change <= 0 || random() < Math.exp(-change / (temperature * transverseG[i]))) {
        energy[i] = here;
        energy[i + 1] = east;
        energy[i - 1] = west;
        energy[i + width] = north;
        energy[i - width] = south;
      } else {
        turnPixel(lattice, i);
      }
    }
  }
}
