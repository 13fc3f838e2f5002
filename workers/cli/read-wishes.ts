import { readFile } from 'node:fs/promises';
import { planWishes, type PlanWishes, usualWishes } from '../../shared/jobs/plan-wishes.js';
import { UsageError } from './usage-error.js';

/**
 * What is asked of a plan, from a JSON file in the form that recipes hold under `wishes`; what the
 * file leaves out is as usual. Throws a UsageError with one sentence that names the file and the field.
 */
export async function readWishes(path: string | null): Promise<PlanWishes> {
  if (path === null) return usualWishes;
  let text: string;
  try {
    text = await readFile(path, 'utf8');
  } catch (error) {
    const { code } = error as NodeJS.ErrnoException;
    throw new UsageError(`The wishes “${path}” cannot be read (${code ?? String(error)}).`);
  }
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch {
    throw new UsageError(`The wishes “${path}” are not JSON.`);
  }
  const parsed = planWishes.safeParse(value);
  if (parsed.success) return parsed.data;
  const [issue] = parsed.error.issues;
  const field = issue.path.join('.') || 'the whole';
  const message = `${issue.message[0].toLowerCase()}${issue.message.slice(1)}`;
  throw new UsageError(`The wishes “${path}” cannot be used: ${field}: ${message}.`);
}
