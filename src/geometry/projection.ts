// Projections between the native sphere and the plane: Calabretta & Greisen 2002, A&A 395, 1077
// (section numbers below are theirs). Plane coordinates in radians; native vectors are
// (cos theta cos phi, cos theta sin phi, sin theta).

export type ProjectionName = 'TAN' | 'SIN' | 'ARC' | 'CEA' | 'CAR';

/** Native latitude of the reference point [deg]: 90 for zenithal, 0 for cylindrical projections. */
export function referenceLatitudeDeg(projection: ProjectionName): 0 | 90 {
  return projection === 'CEA' || projection === 'CAR' ? 0 : 90;
}

/**
 * Native vector to plane, written to `out[0]`, `out[1]`. The vector need not be normalised. False,
 * with `out` untouched, where the projection does not reach it.
 */
export function projectNative(
  projection: ProjectionName,
  lambda: number,
  l: number,
  m: number,
  n: number,
  out: Float64Array | number[],
): boolean {
  if (projection === 'TAN') {
    if (!(n > 0)) return false; // section 5.1.3: R = cot(theta)
    out[0] = m / n;
    out[1] = -l / n;
    return true;
  }
  const r = Math.sqrt(l * l + m * m + n * n);
  if (projection === 'SIN') {
    if (!(n > 0)) return false; // section 5.1.5 without slant: R = cos(theta)
    out[0] = m / r;
    out[1] = -l / r;
  } else if (projection === 'ARC') {
    const across = Math.sqrt(l * l + m * m); // section 5.1.6: R = 90 deg - theta
    const scale = across > 0 ? Math.atan2(across, n) / across : 1 / r;
    out[0] = m * scale;
    out[1] = -l * scale;
  } else {
    out[0] = Math.atan2(m, l);
    // sections 5.2.2 (CEA: y = sin(theta) / lambda) and 5.2.3 (CAR: y = theta)
    out[1] = projection === 'CEA' ? n / (r * lambda) : Math.asin(Math.max(-1, Math.min(1, n / r)));
  }
  return true;
}

/** Plane to native unit vector, written to `out[0..2]`; false outside the projection's image. */
export function deprojectNative(
  projection: ProjectionName,
  lambda: number,
  x: number,
  y: number,
  out: Float64Array | number[],
): boolean {
  if (projection === 'TAN') {
    const n = 1 / Math.sqrt(1 + x * x + y * y);
    return put(out, -y * n, x * n, n);
  }
  if (projection === 'SIN') {
    const square = 1 - x * x - y * y;
    return square >= 0 && put(out, -y, x, Math.sqrt(square));
  }
  if (projection === 'ARC') {
    const r = Math.sqrt(x * x + y * y);
    const scale = r > 0 ? Math.sin(r) / r : 1;
    return r <= Math.PI && put(out, -y * scale, x * scale, Math.cos(r));
  }
  const sine = projection === 'CEA' ? y * lambda : Math.sin(y);
  const reaches = projection === 'CEA' ? Math.abs(sine) <= 1 : Math.abs(y) <= Math.PI / 2;
  const cosine = Math.sqrt(Math.max(0, 1 - sine * sine));
  return reaches && put(out, cosine * Math.cos(x), cosine * Math.sin(x), sine);
}

function put(out: Float64Array | number[], l: number, m: number, n: number): true {
  out[0] = l;
  out[1] = m;
  out[2] = n;
  return true;
}
