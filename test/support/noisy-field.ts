import { makeVectorField, type VectorField } from '../../src/field/vector-field.js';
import { normalNoise } from './random.js';

/** The noise that the checks ask for: 100 G transverse, 10 G vertical. */
export const NOISE = { x: 100, y: 100, z: 10 } as const;

/** A field with seeded noise of `NOISE` added. */
export function withNoise(field: VectorField, seed: number): VectorField {
  const normal = normalNoise(seed);
  const [ny, nx] = field.z.values.shape;
  const part = (axis: 'x' | 'y' | 'z') =>
    field[axis].values.data.map((value) => value + NOISE[axis] * normal());
  return makeVectorField(part('x'), part('y'), part('z'), nx, ny, field.z.pixelMm);
}
