/** Up to these offsets and heights the closed form is used; beyond them the expansion is good to 1e-6. */
const CLOSED_FORM_REACH = 8;
const CLOSED_FORM_HEIGHT = 16;

/**
 * Fourth antiderivative (twice in x, twice in y) of 1 / sqrt(x^2 + y^2 + c^2), the potential of two
 * charged rectangles a distance c apart, and its derivative by c.
 */
function antiderivative(x: number, y: number, c: number): { value: number; slope: number } {
  const r = Math.hypot(x, y, c);
  const alongY = y === 0 ? 0 : y * Math.asinh(y / Math.hypot(x, c));
  const alongX = x === 0 ? 0 : x * Math.asinh(x / Math.hypot(y, c));
  const turn = x * y * Math.atan((x * y) / (c * r));
  return {
    value:
      0.5 * (x * x - c * c) * alongY +
      0.5 * (y * y - c * c) * alongX -
      (r * (x * x + y * y - 2 * c * c)) / 6 -
      c * turn,
    slope: c * (r - alongX - alongY) - turn,
  };
}

/**
 * Mean of 1 / sqrt(r^2 + c^2) over pairs of points in two unit squares whose centres lie (dx, dy) apart,
 * c > 0, and its derivative by c: second differences of the antiderivative nearby, and the value plus
 * a twelfth of its Laplacian (the first correction of averaging over both squares) farther out.
 */
export function cellPairAtHeight(
  dx: number,
  dy: number,
  c: number,
): { readonly value: number; readonly slope: number } {
  if (dx > CLOSED_FORM_REACH || dy > CLOSED_FORM_REACH || c > CLOSED_FORM_HEIGHT) {
    const square = dx * dx + dy * dy + c * c;
    const inverse = 1 / Math.sqrt(square);
    const cube = inverse / square;
    const share = (c * c) / square;
    return {
      value: inverse + (cube * (1 - 3 * share)) / 12,
      slope: -c * cube * (1 + (9 - 15 * share) / (12 * square)),
    };
  }
  let [value, slope] = [0, 0];
  for (const j of [-1, 0, 1]) {
    for (const i of [-1, 0, 1]) {
      const weight = (i === 0 ? -2 : 1) * (j === 0 ? -2 : 1);
      const each = antiderivative(dx + i, dy + j, c);
      value += weight * each.value;
      slope += weight * each.slope;
    }
  }
  return { value, slope };
}
