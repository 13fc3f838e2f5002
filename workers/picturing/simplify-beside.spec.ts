import { afterAll, describe, expect, it } from 'vitest';
import { torus } from '../../test/support/shapes.js';
import { makeSimpleModel } from './simple-model.js';
import { beginSimplifying, endSimplifying, simpleModelOf } from './simplify-beside.js';

const largeRing = () => torus(40, 12, 640, 160).mesh;
const expected = await makeSimpleModel(largeRing());

afterAll(endSimplifying);

describe('simplifying beside', () => {
  it('gives what is made in place, of the mesh as it was when it began', async () => {
    for (let turn = 0; turn < 2; turn++) {
      const mesh = largeRing();
      beginSimplifying(mesh);
      // Only a test may do this: made in place from now on, the model would be another one.
      mesh.positions.fill(1, 3000);
      expect(await simpleModelOf(mesh)).toEqual(expected);
    }
  });

  it('leaves a second mesh to whoever asks for it while it is busy', async () => {
    const [first, second] = [largeRing(), largeRing()];
    beginSimplifying(first);
    beginSimplifying(second);
    second.positions.set(first.positions.map((value) => 2 * value));
    const { mesh } = await simpleModelOf(second);
    expect(Math.max(...mesh.positions)).toBeCloseTo(104, 0);
    expect(await simpleModelOf(first)).toEqual(expected);
  });

  it('does without the thread when that ends early', async () => {
    const mesh = largeRing();
    beginSimplifying(mesh);
    await endSimplifying();
    expect(await simpleModelOf(mesh)).toEqual(expected);
  });
});
