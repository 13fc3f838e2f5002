import { dropUnusedVertices } from '../../shared/geometry/mesh/compact.js';
import { boundingBox, surfaceArea } from '../../shared/geometry/mesh/measure.js';
import { surfacesOf } from '../../shared/geometry/mesh/edge-mates.js';
import type { Shells } from '../../shared/geometry/mesh/shells.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import type { MendingStep } from '../../shared/jobs/model-inspect.js';
import { countOf } from '../intake/refusal-words.js';
import type { Mended } from './mending.js';
import { nestShells } from './shell-nesting.js';
import { turnTriangle } from './turn-facets.js';

export interface OrientedShells extends Mended {
  readonly shells: Shells;
  /** Shells that bound a hollow, by where they lie. */
  readonly cavities: number;
  /** Shells that were found to lie partly inside another one. */
  readonly crossing: number;
  /** Shells that enclosed next to nothing and were dropped. */
  readonly flat: number;
  /** Whether every pair of shells that could be nested was looked at. */
  readonly complete: boolean;
  /** Whether every shell was turned. */
  readonly turnedOutward: boolean;
}

/** A shell is flat when its volume is below this share of its model's area × longest side: a sheet
 *  thinner than a millionth of a millimetre on a metre. Own choice. */
const flatShare = 1e-9;

/**
 * Turns the shells of a closed, consistently wound mesh by how they lie in each other: the outermost
 * face outward, those directly inside them bound hollows and face inward, and so on. Shells that
 * enclose nothing are dropped. Shells that cross others enclose their own volume. The input is not
 * changed; a mesh in order comes back itself. Without any volume an empty mesh comes back.
 */
export function orientShells(mesh: TriangleMesh): OrientedShells {
  const shells = surfacesOf(mesh);
  const nesting = nestShells(mesh, shells);
  const longest = Math.max(...boundingBox(mesh.positions).size);
  const least = (flatShare * surfaceArea(mesh) * longest) / shells.count;
  const verdicts = Array.from({ length: shells.count }, (_, shell) =>
    judge(nesting.volumes[shell], isHollow(nesting, shell), least),
  );
  const flat = verdicts.filter((verdict) => verdict === 'drop').length;
  const turned = verdicts.filter((verdict) => verdict === 'turn').length;
  const kept = shells.count - flat;
  const steps: MendingStep[] = [];
  if (turned > 0) steps.push(turnStep(turned, kept));
  if (flat > 0)
    steps.push({
      kind: 'drop-shells',
      count: flat,
      sentence: `${countOf(flat, 'shell')} ${flat === 1 ? 'enclosed' : 'each enclosed'} no volume and ${flat === 1 ? 'was' : 'were'} dropped.`,
    });
  const made = turned + flat === 0 ? mesh : apply(mesh, shells, verdicts);
  let cavities = 0;
  verdicts.forEach((verdict, shell) => {
    if (verdict !== 'drop' && isHollow(nesting, shell)) cavities++;
  });
  return {
    mesh: made,
    steps,
    places: [],
    shells: flat === 0 ? shells : surfacesOf(made),
    cavities,
    crossing: nesting.crossing,
    flat,
    complete: nesting.complete,
    turnedOutward: turned > 0 && turned === kept,
  };
}

type Verdict = 'keep' | 'turn' | 'drop';

function isHollow({ depths, crosses }: ReturnType<typeof nestShells>, shell: number): boolean {
  return crosses[shell] === 0 && (depths[shell] & 1) === 1;
}

function judge(volume: number, hollow: boolean, least: number): Verdict {
  if (Math.abs(volume) <= least) return 'drop';
  return volume > 0 === hollow ? 'turn' : 'keep';
}

function apply(mesh: TriangleMesh, { labels }: Shells, verdicts: readonly Verdict[]): TriangleMesh {
  const indices = new Uint32Array(mesh.indices.length);
  let filled = 0;
  for (let triangle = 0; triangle < labels.length; triangle++) {
    const verdict = verdicts[labels[triangle]];
    if (verdict === 'drop') continue;
    for (let k = 0; k < 3; k++) indices[filled + k] = mesh.indices[3 * triangle + k];
    if (verdict === 'turn') turnTriangle(indices, filled / 3);
    filled += 3;
  }
  return dropUnusedVertices({ positions: mesh.positions, indices: indices.slice(0, filled) });
}

function turnStep(turned: number, kept: number): MendingStep {
  const sentence =
    turned === kept
      ? 'The whole model was inside out and was turned round. Its shape is the same.'
      : `${countOf(turned, 'shell')} faced the wrong way for where ${turned === 1 ? 'it lies' : 'they lie'} and ${turned === 1 ? 'was' : 'were'} turned: an inner shell bounds a hollow.`;
  return { kind: 'turn-shells', count: turned, sentence };
}
