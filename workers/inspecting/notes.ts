import type { MendingStep, SurfaceState } from '../../shared/jobs/model-inspect.js';
import { mendingKinds } from '../../shared/jobs/model-inspect.js';
import type { MeshReading } from '../intake/mesh-reading.js';
import { countOf, spelledCount } from '../intake/refusal-words.js';
import type { MendedModel } from './mend-to-solid.js';
import { shortNumber } from './short-number.js';

/** A float32 coordinate has 24 binary digits. */
const singleStep = 2 ** -23;
/** Coordinates that step by more than this share of the model show as roughness. */
const roughShare = 1 / 20_000;

/** Every change, that of reading included, in the order in which mending goes. */
export function allSteps(reading: MeshReading, { steps }: MendedModel): MendingStep[] {
  const count = reading.degenerateDropped;
  const dropped: MendingStep[] =
    count === 0
      ? []
      : [
          {
            kind: 'drop-flat',
            count,
            sentence: `${countOf(count, 'facet')} had two corners in one place and ${count === 1 ? 'was' : 'were'} dropped. That changes no shape.`,
          },
        ];
  const order = (step: MendingStep) => mendingKinds.indexOf(step.kind);
  return [...dropped, ...steps].sort((a, b) => order(a) - order(b));
}

/** Remarks that are neither a change nor a question, in the order of their weight. */
export function notesOf(
  reading: MeshReading,
  before: SurfaceState,
  { solid, steps, mesh }: MendedModel,
): string[] {
  const notes: string[] = [];
  notes.push(...reading.notes);
  const farthest = Math.max(...before.min.map((low, axis) => farther(low, before.size[axis])));
  const longest = Math.max(...before.size);
  if (reading.format !== 'obj' && farthest * singleStep > longest * roughShare)
    notes.push(
      `The model lies far from the origin (${spelledCount(Math.round(farthest))}). Its coordinates step by ${shortNumber(farthest * singleStep)} there, which may show as roughness.`,
    );
  if (solid && steps.length === 0 && reading.degenerateDropped === 0 && notes.length === 0)
    notes.push(
      `A closed surface of ${countOf(mesh.indices.length / 3, 'triangle')}. Nothing had to be changed.`,
    );
  return notes;
}

function farther(low: number, size: number): number {
  return Math.max(Math.abs(low), Math.abs(low + size));
}
