import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { seededRandom } from './random.js';
import { facetedTurning, type Profile, sphere } from './shapes.js';

/**
 * Balls threaded on a thin rod along z, their middles `spacingMm` apart: where the spacing is more
 * than the space's diagonal, no two balls share a piece.
 */
export function ballsOnRod(balls: number, spacingMm: number, ballRadius = 6): TriangleMesh {
  const rod = ballRadius / 4;
  const profile: [number, number][] = [[0, -ballRadius]];
  for (let ball = 0; ball < balls; ball++) {
    const middle = ball * spacingMm;
    const reach = Math.sqrt(ballRadius ** 2 - rod ** 2);
    if (ball > 0) profile.push([rod, middle - reach]);
    const steps = 8;
    for (let k = 1; k < steps; k++) {
      const z = middle - reach + (2 * reach * k) / steps;
      profile.push([Math.sqrt(ballRadius ** 2 - (z - middle) ** 2), z]);
    }
    if (ball < balls - 1) profile.push([rod, middle + reach]);
  }
  profile.push([0, (balls - 1) * spacingMm + ballRadius]);
  return facetedTurning('balls on a rod', profile, 12).mesh;
}

/** A bowl: half of a hollow ball, open at the top, with a flat rim. */
export function bowl(radius: number, wall: number, sides: number, rings: number): TriangleMesh {
  const arc = (r: number, k: number): [number, number] => {
    const angle = (Math.PI / 2) * (k / rings);
    return [k === 0 ? 0 : r * Math.sin(angle), -r * Math.cos(angle)];
  };
  const profile: Profile = [
    ...Array.from({ length: rings + 1 }, (_, k) => arc(radius, k)),
    ...Array.from({ length: rings + 1 }, (_, k) => arc(radius - wall, rings - k)),
  ];
  return facetedTurning('bowl', profile, sides).mesh;
}

/** An animal-like body: a ball with seeded bulges and dents, star-shaped about its middle. */
export function lumpyBody(
  radius: number,
  lumps: number,
  seed: number,
  [sides, rings]: readonly [number, number] = [72, 48],
): TriangleMesh {
  const random = seededRandom(seed);
  const centres = Array.from({ length: lumps }, () => {
    const z = 2 * random() - 1;
    const angle = 2 * Math.PI * random();
    const r = Math.sqrt(1 - z * z);
    return [r * Math.cos(angle), r * Math.sin(angle), z, 0.3 + 0.9 * random()] as const;
  });
  const { mesh } = sphere(1, sides, rings);
  const positions = Float64Array.from(mesh.positions);
  for (let k = 0; k < positions.length; k += 3) {
    const x = mesh.positions[k];
    const y = mesh.positions[k + 1];
    const z = mesh.positions[k + 2];
    let reach = 0.45;
    for (const [cx, cy, cz, height] of centres)
      reach += height * Math.exp(9 * (cx * x + cy * y + cz * z - 1));
    positions[k] = radius * reach * x;
    positions[k + 1] = radius * reach * y;
    positions[k + 2] = radius * reach * z;
  }
  return { ...mesh, positions };
}
