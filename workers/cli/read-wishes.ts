import { readFile } from 'node:fs/promises';
import type * as z from 'zod';
import {
  jointWishes,
  type JointWishes,
  noJoints,
  usualJoints,
} from '../../shared/jobs/joint-plan.js';
import {
  type MaterialProfile,
  materialPresets,
  materialProfile,
  usualMaterial,
} from '../../shared/jobs/material-profile.js';
import { planWishes, type PlanWishes, usualWishes } from '../../shared/jobs/plan-wishes.js';
import { UsageError } from './usage-error.js';

/** What is asked of a plan: a file in the form that recipes hold under `wishes`; null is as usual. */
export async function readWishes(path: string | null): Promise<PlanWishes> {
  return path === null ? usualWishes : readJson('wishes', path, planWishes);
}

/** The joints: `none`, or a file in the form that recipes hold under `joints`; null is as usual. */
export async function readJoints(path: string | null): Promise<JointWishes> {
  if (path === null) return usualJoints;
  return path === 'none' ? noJoints : readJson('joints', path, jointWishes);
}

/** The material: the name of one to begin with, or a file in the form that recipes hold. */
export async function readMaterial(nameOrPath: string | null): Promise<MaterialProfile> {
  if (nameOrPath === null) return usualMaterial;
  const preset = materialPresets.find(
    ({ name }) => name.toLowerCase() === nameOrPath.toLowerCase(),
  );
  return preset ?? readJson('material', nameOrPath, materialProfile);
}

/**
 * A JSON file of a known form; what it leaves out is as usual. Throws a UsageError with one
 * sentence that names the file and the field.
 */
async function readJson<S extends z.ZodType>(
  what: 'wishes' | 'joints' | 'material',
  path: string,
  schema: S,
): Promise<z.output<S>> {
  const subject = `The ${what} “${path}”`;
  const verb = what === 'material' ? 'is' : 'are';
  let text: string;
  try {
    text = await readFile(path, 'utf8');
  } catch (error) {
    const { code } = error as NodeJS.ErrnoException;
    throw new UsageError(`${subject} cannot be read (${code ?? String(error)}).`);
  }
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch {
    throw new UsageError(`${subject} ${verb} not JSON.`);
  }
  const parsed = schema.safeParse(value);
  if (parsed.success) return parsed.data;
  const [issue] = parsed.error.issues;
  const field = issue.path.join('.') || 'the whole';
  const message = `${issue.message[0].toLowerCase()}${issue.message.slice(1)}`;
  throw new UsageError(`${subject} cannot be used: ${field}: ${message}.`);
}
