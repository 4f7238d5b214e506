import { fieldArrays, makeVectorField, type VectorField } from './vector-field.js';

/** Weights of the four parts of the functional and when to stop. */
export interface PreprocessingOptions {
  /** Weight of the change from the measured field, and of its vertical component over the horizontal. */
  readonly fidelity?: number;
  readonly verticalFidelity?: number;
  /** Weight of roughness, the square of the Laplacian in G per pixel squared. */
  readonly smoothing?: number;
  readonly iterations?: number;
}

/** A boundary made fit for force-free methods, and what it took. */
export interface PreprocessedField {
  readonly field: VectorField;
  /** Net force and torque over the pressure (Wiegelmann et al. 2006), before and after. */
  readonly forceBefore: number;
  readonly forceAfter: number;
  readonly torqueBefore: number;
  readonly torqueAfter: number;
  /** Root mean square change of the field over its root mean square. */
  readonly change: number;
  readonly iterations: number;
}

const FORCE_WEIGHT = 1;
const TORQUE_WEIGHT = 1;
/** Stop when an iteration lowers the functional by less than this share. */
const LEAST_GAIN = 1e-7;

/** The fields of one problem; x and y are in units of the map's half diagonal about its centre. */
interface Problem {
  readonly nx: number;
  readonly ny: number;
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly measured: readonly Float64Array[];
  /** 1 where the pixel is known; 1 where its Laplacian can be had. */
  readonly known: Uint8Array;
  readonly inner: Uint8Array;
  readonly fidelity: readonly number[];
  readonly smoothing: number;
  readonly pressure: number;
  readonly moment: number;
}

/** The six sums of force and torque for fields (a, b): bilinear and symmetric, so that F(B) = sums(B, B). */
function sums({ x, y }: Problem, a: readonly Float64Array[], b: readonly Float64Array[]) {
  const out = [0, 0, 0, 0, 0, 0];
  const [au, av, aw] = a;
  const [bu, bv, bw] = b;
  for (let i = 0; i < au.length; i++) {
    const across = 0.5 * (au[i] * bw[i] + aw[i] * bu[i]);
    const along = 0.5 * (av[i] * bw[i] + aw[i] * bv[i]);
    const up = aw[i] * bw[i] - au[i] * bu[i] - av[i] * bv[i];
    out[0] += across;
    out[1] += along;
    out[2] += up;
    out[3] += x[i] * up;
    out[4] += y[i] * up;
    out[5] += y[i] * across - x[i] * along;
  }
  return out;
}

/** Five-point Laplacian [per pixel squared]; zero where a neighbour is missing. */
function laplacian({ nx, inner }: Problem, values: Float64Array): Float64Array {
  const out = new Float64Array(values.length);
  for (let i = 0; i < values.length; i++)
    if (inner[i])
      out[i] = values[i + 1] + values[i - 1] + values[i + nx] + values[i - nx] - 4 * values[i];
  return out;
}

/** Adds `scale` times the adjoint Laplacian of `values` to `out`. */
function addAdjoint(
  { nx, inner }: Problem,
  values: Float64Array,
  scale: number,
  out: Float64Array,
): void {
  for (let i = 0; i < values.length; i++) {
    if (!inner[i]) continue;
    const part = scale * values[i];
    out[i + 1] += part;
    out[i - 1] += part;
    out[i + nx] += part;
    out[i - nx] += part;
    out[i] -= 4 * part;
  }
}

/** Negative gradient of the functional, zero at missing pixels; the functional is in units of the pressure. */
function descent(problem: Problem, field: readonly Float64Array[]): Float64Array[] {
  const { x, y, measured, known, fidelity, smoothing, pressure, moment } = problem;
  const [u, v, w] = field;
  const s = sums(problem, field, field);
  const force = s.slice(0, 3).map((value) => (2 * FORCE_WEIGHT * value) / pressure);
  const torque = s.slice(3).map((value) => (2 * TORQUE_WEIGHT * pressure * value) / moment ** 2);
  const out = field.map((values) => new Float64Array(values.length));
  for (let i = 0; i < u.length; i++) {
    if (!known[i]) continue;
    const across = force[0] + torque[2] * y[i];
    const along = force[1] - torque[2] * x[i];
    const up = 2 * (force[2] + torque[0] * x[i] + torque[1] * y[i]);
    out[0][i] = -across * w[i] + up * u[i] - 2 * fidelity[0] * (u[i] - measured[0][i]);
    out[1][i] = -along * w[i] + up * v[i] - 2 * fidelity[1] * (v[i] - measured[1][i]);
    out[2][i] =
      -across * u[i] - along * v[i] - up * w[i] - 2 * fidelity[2] * (w[i] - measured[2][i]);
  }
  field.forEach((values, axis) => {
    addAdjoint(problem, laplacian(problem, values), -2 * smoothing, out[axis]);
    for (let i = 0; i < values.length; i++) if (!known[i]) out[axis][i] = 0;
  });
  return out;
}

const dot = (a: readonly Float64Array[], b: readonly Float64Array[]) =>
  a.reduce((sum, part, axis) => {
    let own = 0;
    for (let i = 0; i < part.length; i++) own += part[i] * b[axis][i];
    return sum + own;
  }, 0);

/**
 * The functional along B + t D is a polynomial of fourth degree in t, whose coefficients are had
 * exactly: the least value on the way down costs no further look at the map.
 */
function functionalAlong(
  problem: Problem,
  field: readonly Float64Array[],
  step: readonly Float64Array[],
) {
  const { measured, fidelity, smoothing, pressure, moment } = problem;
  const [a, b, c] = [
    sums(problem, field, field),
    sums(problem, field, step),
    sums(problem, step, step),
  ];
  let [q0, q1, q2] = [0, 0, 0];
  field.forEach((values, axis) => {
    const [rough, rougher] = [laplacian(problem, values), laplacian(problem, step[axis])];
    for (let i = 0; i < values.length; i++) {
      const change = values[i] - measured[axis][i];
      const d = step[axis][i];
      q0 += fidelity[axis] * change * change + smoothing * rough[i] * rough[i];
      q1 += 2 * (fidelity[axis] * change * d + smoothing * rough[i] * rougher[i]);
      q2 += fidelity[axis] * d * d + smoothing * rougher[i] * rougher[i];
    }
  });
  const weights = a.map((_, k) =>
    k < 3 ? FORCE_WEIGHT / pressure : (TORQUE_WEIGHT * pressure) / moment ** 2,
  );
  const value = (t: number) =>
    weights.reduce((sum, w, k) => sum + w * (a[k] + t * (2 * b[k] + t * c[k])) ** 2, 0) +
    q0 +
    t * (q1 + t * q2);
  const slope = (t: number) =>
    weights.reduce(
      (sum, w, k) => sum + 2 * w * (a[k] + t * (2 * b[k] + t * c[k])) * 2 * (b[k] + t * c[k]),
      0,
    ) +
    q1 +
    2 * t * q2;
  return { value, slope };
}

/** First place on the way down where the slope is zero: doubled until it rises, then halved. */
function leastAlong(slope: (t: number) => number, start: number): number {
  let high = start;
  for (let i = 0; i < 60 && slope(high) < 0; i++) high *= 2;
  let low = 0;
  for (let i = 0; i < 60; i++) {
    const middle = 0.5 * (low + high);
    if (slope(middle) < 0) low = middle;
    else high = middle;
  }
  return 0.5 * (low + high);
}

function makeProblem(field: VectorField, options: PreprocessingOptions): Problem {
  const { nx, ny, bx, by, bz } = fieldArrays(field);
  const size = nx * ny;
  const known = Uint8Array.from(bx, (_, i) => (Number.isNaN(bx[i] * by[i] * bz[i]) ? 0 : 1));
  const measured = [bx, by, bz].map((part) => part.map((value, i) => (known[i] ? value : 0)));
  const unit = 0.5 * Math.hypot(nx, ny);
  const [x, y] = [new Float64Array(size), new Float64Array(size)];
  const inner = new Uint8Array(size);
  let [pressure, moment] = [0, 0];
  for (let i = 0; i < size; i++) {
    const [column, row] = [i % nx, Math.floor(i / nx)];
    x[i] = (column - 0.5 * (nx - 1)) / unit;
    y[i] = (row - 0.5 * (ny - 1)) / unit;
    const isInside = column > 0 && column < nx - 1 && row > 0 && row < ny - 1;
    inner[i] =
      isInside && known[i] && known[i + 1] && known[i - 1] && known[i + nx] && known[i - nx]
        ? 1
        : 0;
    const square = measured[0][i] ** 2 + measured[1][i] ** 2 + measured[2][i] ** 2;
    pressure += square;
    moment += square * Math.hypot(x[i], y[i]);
  }
  const { fidelity = 1e-3, verticalFidelity = 10, smoothing = 1e-4 } = options;
  return {
    ...{ nx, ny, x, y, measured, known, inner, smoothing, pressure, moment },
    fidelity: [fidelity, fidelity, fidelity * verticalFidelity],
  };
}

/** Net force and torque over the pressure and over the pressure times the distance. */
function imbalance(problem: Problem, field: readonly Float64Array[]) {
  const s = sums(problem, field, field).map(Math.abs);
  let [pressure, moment] = [0, 0];
  for (let i = 0; i < field[0].length; i++) {
    const square = field[0][i] ** 2 + field[1][i] ** 2 + field[2][i] ** 2;
    pressure += square;
    moment += square * Math.hypot(problem.x[i], problem.y[i]);
  }
  return { force: (s[0] + s[1] + s[2]) / pressure, torque: (s[3] + s[4] + s[5]) / moment };
}

/**
 * Makes a measured boundary as free of net force and torque as a force-free field above it asks for,
 * with little change and less roughness: minimises the sum of squared forces and torques, change and
 * Laplacian (Wiegelmann, Inhester & Sakurai 2006, Sol. Phys. 233, 215) by conjugate gradients (Polak
 * & Ribiere 1969). Missing pixels count as no field and stay missing.
 */
export function preprocessField(
  field: VectorField,
  options: PreprocessingOptions = {},
): PreprocessedField {
  const { nx, ny, pixelMm } = fieldArrays(field);
  const problem = makeProblem(field, options);
  const state = problem.measured.map((part) => part.slice());
  const before = imbalance(problem, state);
  let down = descent(problem, state);
  let step = down.map((part) => part.slice());
  let iterations = 0;
  const most = options.iterations ?? 150;
  for (; iterations < most; iterations++) {
    const { value, slope } = functionalAlong(problem, state, step);
    const t = leastAlong(slope, 1);
    if (!(value(0) - value(t) > LEAST_GAIN * value(0))) break;
    state.forEach((part, axis) => {
      for (let i = 0; i < part.length; i++) part[i] += t * step[axis][i];
    });
    const next = descent(problem, state);
    const turn = Math.max(0, (dot(next, next) - dot(next, down)) / dot(down, down));
    step = next.map((part, axis) => part.map((value, i) => value + turn * step[axis][i]));
    // A direction that does not lead down: begin anew.
    if (dot(step, next) <= 0) step = next.map((part) => part.slice());
    down = next;
  }
  const after = imbalance(problem, state);
  const moved = state.map((part, axis) =>
    part.map((value, i) => value - problem.measured[axis][i]),
  );
  const [x, y, z] = state.map((part) =>
    part.map((value, i) => (problem.known[i] ? value : Number.NaN)),
  );
  return {
    field: makeVectorField(x, y, z, nx, ny, pixelMm),
    forceBefore: before.force,
    forceAfter: after.force,
    torqueBefore: before.torque,
    torqueAfter: after.torque,
    change: Math.sqrt(dot(moved, moved) / problem.pressure),
    iterations,
  };
}
