import type { ManifoldToplevel } from 'manifold-3d';
import { beforeAll, describe, expect, it } from 'vitest';
import { type Body } from '../../shared/geometry/cutting/apply-tree.js';
import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { type Zone, planWishes, type PlanWishes } from '../../shared/jobs/plan-wishes.js';
import { type CutTree } from '../../shared/jobs/recipe.js';
import { choosePlan, type PlanChoice, remakePlan } from '../../workers/planning/choose-plan.js';
import { leafPath } from '../../workers/planning/exact-plan.js';
import { rangeAlong } from '../../workers/planning/sweep-tables.js';
import { measureZones } from '../../workers/proof/zone-clearance.js';
import { silentContext } from '../../workers/runtime/job-context.js';
import { JobRefusal } from '../../workers/runtime/job-refusal.js';
import { loadSolids, type Solids } from '../../workers/solids/solid-kernel.js';
import { lumpyBody } from '../support/planning-shapes.js';
import { randomDirection, seededRandom } from '../support/random.js';
import { box, torus, torusKnot } from '../support/shapes.js';
import { loadManifold } from '../support/triangulator.js';

let solids: Solids;
let manifold: ManifoldToplevel;
beforeAll(async () => {
  [solids, manifold] = await Promise.all([loadSolids(), loadManifold()]);
});

const cube = (sideMm: number): BuildSpace => ({
  shape: 'rectangular',
  widthMm: sideMm,
  depthMm: sideMm,
  heightMm: sideMm,
});

function inputOf(
  mesh: TriangleMesh,
  spaces: BuildSpace[],
  wishes: Partial<PlanWishes>,
  effort = 0,
) {
  return {
    mesh,
    spaces,
    wishes: planWishes.parse(wishes),
    seed: 1,
    effort,
    triangulate: solids.triangulate,
    toleranceMm: 0.02,
    context: silentContext,
  };
}

/** With next to no search: these checks ask for what must always hold. */
const plan = (
  mesh: TriangleMesh,
  spaces: BuildSpace[],
  wishes: Partial<PlanWishes> = {},
  effort = 0,
) => choosePlan(inputOf(mesh, spaces, wishes, effort));

const shapes: (() => TriangleMesh)[] = [
  () => lumpyBody(80, 6, 5, [28, 20]),
  () => lumpyBody(70, 8, 9, [28, 20]),
  () => torus(70, 22, 32, 16).mesh,
  () => torusKnot(26, 9, 90, 10),
  () => box([0, 0, 0], [190, 150, 60]).mesh,
];

/** How many pieces have material inside a zone, by manifold-3d's own intersection. */
function piecesInside(bodies: readonly Body[], zone: Zone): number {
  const { Manifold, Mesh } = manifold;
  const region =
    zone.shape === 'sphere'
      ? Manifold.sphere(zone.radiusMm, 32).translate([...zone.centre])
      : zone.shape === 'box'
        ? Manifold.cube(
            [0, 1, 2].map((k) => zone.max[k]! - zone.min[k]!) as [number, number, number],
          ).translate([...zone.min])
        : null;
  if (!region) throw new Error('Painted zones are judged by their corners.');
  let count = 0;
  for (const { mesh } of bodies) {
    const solid = new Manifold(
      new Mesh({
        numProp: 3,
        vertProperties: Float32Array.from(mesh.positions),
        triVerts: mesh.indices,
      }),
    );
    const shared = solid.intersect(region);
    if (shared.volume() > 1e-3) count++;
    shared.delete();
    solid.delete();
  }
  region.delete();
  return count;
}

/** How many pieces have one of the painted facets' corners. */
function piecesWithCorners(bodies: readonly Body[], mesh: TriangleMesh, facets: readonly number[]) {
  const key = (p: Float64Array, k: number) => `${p[3 * k]} ${p[3 * k + 1]} ${p[3 * k + 2]}`;
  const corners = new Set(
    facets.flatMap((facet) =>
      [0, 1, 2].map((c) => key(mesh.positions, mesh.indices[3 * facet + c]!)),
    ),
  );
  return bodies.filter(({ mesh: { positions } }) => {
    for (let k = 0; k < positions.length / 3; k++) if (corners.has(key(positions, k))) return true;
    return false;
  }).length;
}

function randomZone(mesh: TriangleMesh, random: () => number, kind: number): Zone {
  const facets = mesh.indices.length / 3;
  const facet = Math.floor(random() * facets);
  const at = (axis: number) => mesh.positions[3 * mesh.indices[3 * facet]! + axis]!;
  const centre: [number, number, number] = [at(0), at(1), at(2)];
  const reach = 4 + 14 * random();
  if (kind === 0) return { shape: 'sphere', name: 'a ball', centre, radiusMm: reach };
  if (kind === 1)
    return {
      shape: 'box',
      name: 'a box',
      min: [centre[0] - reach, centre[1] - 0.6 * reach, centre[2] - reach],
      max: [centre[0] + reach, centre[1] + 0.6 * reach, centre[2] + reach],
    };
  const near = Array.from({ length: facets }, (_, k) => k).filter((k) => {
    const v = mesh.indices[3 * k]!;
    return (
      Math.hypot(...[0, 1, 2].map((axis) => mesh.positions[3 * v + axis]! - centre[axis]!)) < reach
    );
  });
  return { shape: 'facets', name: 'paint', facets: near };
}

describe('keep-whole zones', () => {
  const seed = 4242;
  it(
    `no seam crosses one on the exact pieces, in 200 cases (seed ${seed})`,
    { timeout: 400_000 },
    () => {
      const random = seededRandom(seed);
      let refused = 0;
      let cuts = 0;
      for (let n = 0; n < 200; n++) {
        const mesh = shapes[n % shapes.length]!();
        const zones = Array.from({ length: 1 + (n % 2) }, () => randomZone(mesh, random, n % 3));
        let choice: PlanChoice;
        try {
          choice = plan(mesh, [cube(90)], { keepWhole: zones });
        } catch (error) {
          expect(error).toBeInstanceOf(JobRefusal);
          refused++;
          continue;
        }
        cuts += choice.bodies.length - 1;
        for (const zone of zones) {
          const inside =
            zone.shape === 'facets'
              ? piecesWithCorners(choice.bodies, mesh, zone.facets)
              : piecesInside(choice.bodies, zone);
          expect(inside, `case ${n}`).toBe(1);
        }
        const { crossed, leastMm } = measureZones(
          zones,
          choice.bodies.map((body) => body.mesh),
          mesh,
        );
        expect(crossed).toEqual([]);
        expect(leastMm, `case ${n} ${JSON.stringify(zones).slice(0, 300)}`).toBeGreaterThan(0.05);
      }
      console.log(`${200 - refused} plans, ${refused} refused, ${cuts} cuts`);
      expect(cuts).toBeGreaterThan(400);
      expect(refused).toBeLessThan(20);
    },
  );

  it('are measured by the proof with distances of its own: a seam through one is named', () => {
    const mesh = box([0, 0, 0], [190, 150, 60]).mesh;
    const bodies = plan(mesh, [cube(100)]).bodies.map((body) => body.mesh);
    const all: Zone = { shape: 'box', name: 'everything', min: [-1, -1, -1], max: [191, 151, 61] };
    const outside: Zone = { shape: 'sphere', name: 'beside', centre: [-50, 0, 0], radiusMm: 10 };
    const found = measureZones([all, outside], bodies, mesh);
    expect(found.crossed).toEqual(['everything']);
    const painted: Zone = { shape: 'facets', name: 'paint', facets: [0, 1, 2, 3] };
    expect(measureZones([painted], bodies, mesh).leastMm).toBeGreaterThanOrEqual(0);
  });

  it('too large for any envelope are refused with a sentence', () => {
    const mesh = box([0, 0, 0], [190, 150, 60]).mesh;
    const zone: Zone = { shape: 'box', name: 'lettering', min: [5, 5, 5], max: [185, 145, 55] };
    expect(() => plan(mesh, [cube(100)], { keepWhole: [zone] })).toThrow(/keeps all zones whole/);
    const painted: Zone = { shape: 'facets', name: 'paint', facets: [99] };
    expect(() => plan(mesh, [cube(100)], { keepWhole: [painted] })).toThrow(/another revision/);
  });
});

describe('locked cuts', () => {
  it('appear unchanged and first, whatever else is planned (60 seeded cases)', () => {
    const random = seededRandom(77);
    for (let n = 0; n < 60; n++) {
      const mesh = shapes[n % shapes.length]!();
      const planes = Array.from({ length: 1 + (n % 2) }, () => {
        const normal = [...randomDirection(random)] as [number, number, number];
        const [low, high] = rangeAlong(mesh.positions, normal);
        return { normal, offset: low + (0.3 + 0.4 * random()) * (high - low) };
      });
      const { tree, bodies } = plan(mesh, [cube(90)], { lockedCuts: planes });
      const locked = cutsOf(tree).filter((cut) => cut.locked);
      expect(locked.length).toBeGreaterThan(0);
      expect(cutsOf(tree)[0]!.locked).toBe(true);
      for (const { plane, reason } of locked) {
        expect(planes).toContainEqual(plane);
        expect(reason).toMatch(/^Your own cut/);
      }
      expect(bodies.length).toBeGreaterThan(1);
    }
  });

  it('are made even when the model would fit whole, and contradict zones with a sentence', () => {
    const mesh = box([0, 0, 0], [60, 40, 30]).mesh;
    const lockedCuts = [{ normal: [1, 0, 0] as [number, number, number], offset: 21.5 }];
    const { bodies, tree } = plan(mesh, [cube(100)], { lockedCuts });
    expect(bodies).toHaveLength(2);
    expect(cutsOf(tree)[0]!.plane).toEqual(lockedCuts[0]);
    const zone: Zone = { shape: 'sphere', name: 'boss', centre: [20, 20, 30], radiusMm: 8 };
    expect(() => plan(mesh, [cube(100)], { lockedCuts, keepWhole: [zone] })).toThrow(
      'Your own cut 1 crosses the keep-whole zone “boss”. Move one of the two.',
    );
  });
});

describe('several envelopes', () => {
  it('each piece goes to the first that holds it; the large one only where it is needed', () => {
    const mesh = box([0, 0, 0], [260, 40, 40]).mesh;
    const large: BuildSpace = { shape: 'rectangular', widthMm: 200, depthMm: 60, heightMm: 60 };
    const alone = plan(mesh, [cube(90)], {}, 0.05);
    const { figures } = plan(mesh, [cube(90), large], {}, 0.05);
    expect(alone.bodies.length).toBeGreaterThanOrEqual(3);
    expect(figures.objectives.pieces).toBe(2);
    expect(figures.bodies.map((body) => body.space)).toContain(1);
    // A round bed among them.
    const round: BuildSpace = { shape: 'round', diameterMm: 280, heightMm: 60 };
    expect(plan(mesh, [cube(90), round], {}, 0.05).bodies).toHaveLength(1);
  });
});

describe('every plan that is offered', () => {
  const cases = Array.from({ length: 30 }, (_, n) => n);
  it.each(cases)('keeps its bound, adds up and comes together by straight moves (case %i)', (n) => {
    const mesh = n < 20 ? lumpyBody(60 + 3 * n, 6, n, [24, 16]) : shapes[n % shapes.length]!();
    const choice = plan(mesh, [cube(85)], {}, n < 3 ? 0.05 : 0);
    const { bounds, offers, chosenOffer, figures } = choice;
    expect(offers[chosenOffer!]!.tree).toBe(choice.tree);
    for (const { objectives, tree, bestAt } of offers) {
      expect(objectives.pieces).toBeGreaterThanOrEqual(bounds.pieces);
      expect(objectives.pieces).toBeLessThanOrEqual(bounds.gridPieces);
      expect(objectives.supportMm3).toBeGreaterThanOrEqual(0);
      expect(bestAt.length).toBeGreaterThan(0);
      for (const { reason } of cutsOf(tree)) expect(reason).toMatch(/^[A-Z].*\d.*\.$/);
    }
    expect(figures.objectives).toEqual(offers[chosenOffer!]!.objectives);
    // What lies above a cut lies above it altogether: it comes off straight along the normal.
    cutsWithPaths(choice.tree).forEach(({ path, plane }) => {
      const along = ({ mesh: { positions: p } }: Body) => {
        const heights = Array.from({ length: p.length / 3 }, (_, k) =>
          [0, 1, 2].reduce(
            (sum, axis) => sum + plane.normal[axis]! * p[3 * k + axis]!,
            -plane.offset,
          ),
        );
        return [Math.min(...heights), Math.max(...heights)] as const;
      };
      for (const body of choice.bodies) {
        if (leafPath(body).startsWith(`${path}a`)) expect(along(body)[0]).toBeGreaterThan(-1e-6);
        if (leafPath(body).startsWith(`${path}b`)) expect(along(body)[1]).toBeLessThan(1e-6);
      }
    });
  });

  it('is the same for the same wishes and seed, and can be made again from its tree alone', () => {
    const mesh = lumpyBody(90, 7, 3, [32, 24]);
    const wishes = { showDirections: [[0, -1, 0]] as [number, number, number][] };
    const [one, other] = [
      plan(mesh, [cube(100)], wishes, 0.1),
      plan(mesh, [cube(100)], wishes, 0.1),
    ];
    expect(JSON.stringify(one.offers)).toBe(JSON.stringify(other.offers));
    for (const { tree, objectives } of one.offers) {
      const again = remakePlan(inputOf(mesh, [cube(100)], wishes), tree);
      expect(again.figures.objectives.pieces).toBe(objectives.pieces);
      expect(again.figures.objectives.visibleSeamMm).toBeCloseTo(objectives.visibleSeamMm, 3);
      expect(cutsOf(again.tree)).toEqual(cutsOf(tree));
    }
    const smaller = inputOf(mesh, [cube(60)], wishes);
    expect(() => remakePlan(smaller, one.tree)).toThrow(/would not fit/);
  });

  it('gives at least three clearly different ones where they exist', () => {
    const { offers } = plan(lumpyBody(150, 9, 4, [48, 32]), [cube(150)], {}, 0.3);
    expect(offers.length).toBeGreaterThanOrEqual(3);
  });

  it('takes the best so far when the person has enough', () => {
    const mesh = lumpyBody(150, 9, 4, [48, 32]);
    const stages: string[] = [];
    let asked = 0;
    const context = {
      throwIfCancelled: () => {},
      progress: (stage: string) => void stages.push(stage),
      isEnough: () => ++asked > 40,
    };
    const hurried = choosePlan({ ...inputOf(mesh, [cube(150)], {}, 1), context });
    expect(hurried.bodies.length).toBeLessThanOrEqual(hurried.bounds.gridPieces);
    expect(stages.some((stage) => /\d+ pieces so far/.test(stage))).toBe(true);
    expect(hurried.searchMs).toBeLessThan(20_000);
  });
});

describe('seams', () => {
  it('keep off the side that is looked at, when that matters', () => {
    const mesh = box([0, 0, 0], [170, 60, 60]).mesh;
    const sight = (showDirections: [number, number, number][]) =>
      plan(mesh, [cube(90)], { showDirections }, 0.05).figures.objectives.visibleSeamMm;
    // Seen from the front only, three of the four sides that a seam goes round hardly count.
    expect(sight([[0, -1, 0]])).toBeLessThan(0.5 * sight([]));
  });
});

function cutsOf(tree: CutTree): Extract<CutTree, { kind: 'cut' }>[] {
  return tree.kind === 'leaf' ? [] : [tree, ...cutsOf(tree.above), ...cutsOf(tree.below)];
}

function cutsWithPaths(
  tree: CutTree,
  path = '',
): { path: string; plane: { normal: readonly number[]; offset: number } }[] {
  if (tree.kind === 'leaf') return [];
  return [
    { path, plane: tree.plane },
    ...cutsWithPaths(tree.above, `${path}a`),
    ...cutsWithPaths(tree.below, `${path}b`),
  ];
}
