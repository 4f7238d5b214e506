const MU0 = 4e-7 * Math.PI;
const RADIUS_MM = 695.7;

/**
 * Energy [J] and flux of one polarity [Mx] of the field of charges below a round Sun: the closed field of
 * charges, summed over an equal-area cap of the sphere, E = 1/(2 mu0) integral of phi Br (exact but
 * for the sum; the field outside a sphere of charges inside it is theirs everywhere). Charges as [G Mm^2,
 * x west, y north, depth in Mm].
 */
export function sphereTruth(charges: readonly (readonly [number, number, number, number])[]): {
  readonly energy: number;
  readonly flux: number;
} {
  const n = 700;
  const h = 0.4;
  let energy = 0;
  let flux = 0;
  for (let j = 0; j < n; j++) {
    const sine = ((j + 0.5 - n / 2) * h) / RADIUS_MM;
    const cosine = Math.sqrt(1 - sine * sine);
    for (let i = 0; i < n; i++) {
      const lon = ((i + 0.5 - n / 2) * h) / RADIUS_MM;
      const up = [cosine * Math.sin(lon), sine, cosine * Math.cos(lon)];
      let phi = 0;
      let radial = 0;
      for (const [q, x, y, depth] of charges) {
        const d = [
          RADIUS_MM * up[0] - x,
          RADIUS_MM * up[1] - y,
          RADIUS_MM * up[2] - RADIUS_MM + depth,
        ];
        const r = Math.hypot(...d);
        phi += q / r;
        radial += (q * (d[0] * up[0] + d[1] * up[1] + d[2] * up[2])) / r ** 3;
      }
      energy += phi * radial;
      if (radial > 0) flux += radial;
    }
  }
  return {
    energy: (energy * 1e-8 * 1e6 * (h * 1e6) ** 2) / (2 * MU0),
    flux: flux * h * h * 1e16,
  };
}
