/** Up to this offset the closed form is used; beyond it the expansion is good to 1e-6. */
export const CLOSED_FORM_REACH = 8;

/** Fourth antiderivative (twice in x, twice in y) of 1 / sqrt(x^2 + y^2). */
function antiderivative(x: number, y: number): number {
  const r = Math.hypot(x, y);
  let sum = -(r ** 3) / 6;
  if (x !== 0) sum += 0.5 * x * x * y * Math.asinh(y / Math.abs(x));
  if (y !== 0) sum += 0.5 * x * y * y * Math.asinh(x / Math.abs(y));
  return sum;
}

function closedForm(dx: number, dy: number): number {
  let sum = 0;
  for (const [j, weightY] of [
    [-1, 1],
    [0, -2],
    [1, 1],
  ]) {
    sum +=
      weightY *
      (antiderivative(dx - 1, dy + j) -
        2 * antiderivative(dx, dy + j) +
        antiderivative(dx + 1, dy + j));
  }
  return sum;
}

const nearby = new Map<number, number>();

/**
 * Mean of 1 / distance between a point in one unit square and a point in another whose centre lies
 * (dx, dy) whole squares away: the second differences of the fourth antiderivative nearby, and
 * 1/r + 1/(12 r^3) (the first correction of averaging over both squares) farther out.
 */
export function cellPairInverseDistance(dx: number, dy: number): number {
  if (dx > CLOSED_FORM_REACH || dy > CLOSED_FORM_REACH) {
    const square = dx * dx + dy * dy;
    const inverse = 1 / Math.sqrt(square);
    return inverse + inverse / (12 * square);
  }
  const key = dx * (CLOSED_FORM_REACH + 1) + dy;
  const known = nearby.get(key);
  if (known !== undefined) return known;
  const value = closedForm(dx, dy);
  nearby.set(key, value);
  return value;
}
