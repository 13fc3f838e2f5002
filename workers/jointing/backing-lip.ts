import { type SeamRegion } from '../building/seam-areas.js';
import { type CrossSection, type SolidScope } from '../solids/solid-kernel.js';
import { type JointTask } from './plan-joints.js';

/** A strip that is glued behind the wall of one piece and slides behind the other's. */
export interface Lip {
  readonly lengthMm: number;
}
export function makeLips(
  _scope: SolidScope,
  _region: CrossSection,
  _seam: SeamRegion,
  _task: JointTask,
): Lip[] {
  return [];
}
