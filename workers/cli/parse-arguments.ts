import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { parseEnvelope } from './parse-envelope.js';
import { UsageError } from './usage-error.js';

export interface PlanCommand {
  kind: 'plan';
  /** As the person wrote it. */
  modelPath: string;
  space: BuildSpace;
  seed: number;
  millimetresPerUnit: number;
  outFolder: string | null;
  json: boolean;
}
export type Command = { kind: 'help' } | PlanCommand;

const TAKING_VALUES = ['--envelope', '--margin', '--seed', '--unit', '--out'] as const;
type ValueOption = (typeof TAKING_VALUES)[number];
const LARGEST_SEED = 2 ** 31 - 1;

/** What the words after the program's name ask for. Throws a UsageError with one sentence. */
export function parseArguments(words: readonly string[]): Command {
  if (words.includes('--help') || words.includes('-h')) return { kind: 'help' };
  const { names, values, json } = sortWords(words);
  const [verb, modelPath, ...more] = names;
  if (verb !== 'plan')
    throw new UsageError(
      verb === undefined
        ? 'Say what to do, for example: plan MODEL.stl --envelope 220x220x250 (--help shows everything).'
        : `“${verb}” is not a command; the one there is, is: plan (--help shows everything).`,
    );
  if (modelPath === undefined) throw new UsageError('Name the STL file to plan after “plan”.');
  return naming(modelPath, () => {
    if (more.length > 0) throw new UsageError(`“${more[0]}” is one file too many`);
    const envelope = values.get('--envelope');
    if (envelope === undefined)
      throw new UsageError('the envelope is missing, for example --envelope 220x220x250');
    return {
      kind: 'plan',
      modelPath,
      space: parseEnvelope(envelope, values.get('--margin') ?? '0'),
      seed: parseSeed(values.get('--seed') ?? '1'),
      millimetresPerUnit: parseUnit(values.get('--unit') ?? 'mm'),
      outFolder: values.get('--out') ?? null,
      json,
    };
  });
}

function naming<R>(modelPath: string, parse: () => R): R {
  try {
    return parse();
  } catch (error) {
    throw nameFile(modelPath, error);
  }
}

/** Completes what went wrong with a file's arguments to a sentence; other errors stay as they are. */
export function nameFile(modelPath: string, error: unknown): unknown {
  if (!(error instanceof UsageError)) return error;
  return new UsageError(`Cannot plan “${modelPath}”: ${error.message}.`);
}

function sortWords(words: readonly string[]) {
  const names: string[] = [];
  const values = new Map<ValueOption, string>();
  let json = false;
  for (let i = 0; i < words.length; i++) {
    const word = words[i];
    const equals = word.indexOf('=');
    const name = word.startsWith('--') && equals > 0 ? word.slice(0, equals) : word;
    if (word === '--json') json = true;
    else if (isValueOption(name)) {
      const value = name === word ? words[++i] : word.slice(equals + 1);
      if (value === undefined || value === '' || value.startsWith('--'))
        throw new UsageError(`The option ${name} needs a value after it${forFile(names)}.`);
      if (values.has(name))
        throw new UsageError(`The option ${name} is given twice${forFile(names)}.`);
      values.set(name, value);
    } else if (word.startsWith('-') && word !== '-')
      throw new UsageError(
        `The option “${word}” is not known${forFile(names)} (--help shows everything).`,
      );
    else names.push(word);
  }
  return { names, values, json };
}

function forFile(names: readonly string[]): string {
  return names[1] === undefined ? '' : ` (planning “${names[1]}”)`;
}

function isValueOption(word: string): word is ValueOption {
  return (TAKING_VALUES as readonly string[]).includes(word);
}

function parseSeed(text: string): number {
  const seed = /^\d+$/.test(text) ? Number(text) : NaN;
  if (seed <= LARGEST_SEED) return seed;
  throw new UsageError(`the seed “${text}” is not a whole number from 0 to ${LARGEST_SEED}`);
}

function parseUnit(text: string): number {
  if (text === 'mm') return 1;
  if (text === 'inch') return 25.4;
  const factor = /^\d+(\.\d+)?(e[+-]?\d+)?$/i.test(text) ? Number(text) : NaN;
  if (factor > 0 && factor <= 1e6) return factor;
  throw new UsageError(
    `the unit “${text}” is neither mm nor inch nor a number of millimetres above 0 and up to 1000000`,
  );
}
