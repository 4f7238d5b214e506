/**
 * Mean over blocks of factor x factor pixels, ignoring NaN; a block is NaN where less than half of it
 * is known. Pixels of an incomplete last block are dropped.
 */
export function blockMean(
  values: Float64Array,
  nx: number,
  ny: number,
  factor: number,
): { readonly values: Float64Array; readonly nx: number; readonly ny: number } {
  const mx = Math.floor(nx / factor);
  const my = Math.floor(ny / factor);
  const out = new Float64Array(mx * my);
  for (let y = 0; y < my; y++) {
    for (let x = 0; x < mx; x++) {
      let sum = 0;
      let count = 0;
      for (let j = 0; j < factor; j++) {
        for (let i = 0; i < factor; i++) {
          const value = values[x * factor + i + nx * (y * factor + j)];
          if (!Number.isNaN(value)) {
            sum += value;
            count++;
          }
        }
      }
      out[x + mx * y] = 2 * count >= factor * factor ? sum / count : Number.NaN;
    }
  }
  return { values: out, nx: mx, ny: my };
}
