/** Heights [Mm] of `count` levels from 0 to `topMm`, equally far apart. */
export function uniformHeights(count: number, topMm: number): Float64Array {
  checkLevels(count, topMm);
  return Float64Array.from({ length: count }, (_, i) =>
    count === 1 ? 0 : (topMm * i) / (count - 1),
  );
}

/**
 * Heights [Mm] of `count` levels from 0 to `topMm`: the first step is `firstMm`, each next one longer by
 * the same factor, so that levels lie close where the field changes fast. Throws RangeError where even
 * equal steps of `firstMm` go beyond the top.
 */
export function geometricHeights(count: number, topMm: number, firstMm: number): Float64Array {
  checkLevels(count, topMm);
  const steps = count - 1;
  if (steps < 1) return Float64Array.of(0);
  if (!(firstMm > 0 && firstMm * steps <= topMm * (1 + 1e-12))) {
    throw new RangeError(`${steps} steps from ${firstMm} Mm on do not end at ${topMm} Mm`);
  }
  const factor = growth(steps, topMm / firstMm);
  const heights = new Float64Array(count);
  for (let i = 1, step = firstMm; i < count; i++, step *= factor)
    heights[i] = heights[i - 1] + step;
  heights[steps] = topMm;
  return heights;
}

/** The factor f >= 1 with 1 + f + ... + f^(steps - 1) = sum, by bisection. */
function growth(steps: number, sum: number): number {
  if (steps === 1) return 1;
  const total = (factor: number) => {
    let value = 0;
    for (let i = 0; i < steps; i++) value = 1 + factor * value;
    return value;
  };
  let [low, high] = [1, sum];
  for (let i = 0; i < 200 && high - low > 1e-15 * high; i++) {
    const middle = (low + high) / 2;
    if (total(middle) < sum) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

function checkLevels(count: number, topMm: number): void {
  if (!(Number.isInteger(count) && count >= 1 && topMm > 0)) {
    throw new RangeError(`wanted levels up to a height above 0, got ${count} up to ${topMm} Mm`);
  }
}
