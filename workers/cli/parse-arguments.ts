import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { fewestRemeshCells, mostRemeshCells } from '../../shared/jobs/mending-choices.js';
import { parseEnvelopes } from './parse-envelope.js';
import { UsageError } from './usage-error.js';

export interface PlanCommand {
  kind: 'plan';
  /** As the person wrote it. */
  modelPath: string;
  /** The first is preferred; at least one. */
  spaces: BuildSpace[];
  /** A JSON file with what is asked of the plan; null for the usual. */
  wishesPath: string | null;
  /** `none`, or a JSON file with the joints; null for the usual. */
  jointsPath: string | null;
  /** The name of a material to begin with, or a JSON file; null for the usual. */
  material: string | null;
  seed: number;
  /** Null when the person named no unit: then it is the file's own, or mm. */
  millimetresPerUnit: number | null;
  /** Longest rim that is filled, mm; null fills only pinholes. */
  fillHolesUpToMm: number | null;
  remeshCells: number | null;
  /** Numbers of the parts to take, from 0; null takes all. */
  parts: number[] | null;
  /** Whether a change by mending is taken without asking. */
  accept: boolean;
  outFolder: string | null;
  json: boolean;
}
export type Command = { kind: 'help' } | PlanCommand;

const TAKING_VALUES = [
  '--envelope',
  '--margin',
  '--wishes',
  '--joints',
  '--material',
  '--seed',
  '--unit',
  '--fill-holes',
  '--remesh',
  '--parts',
  '--out',
] as const;
type ValueOption = (typeof TAKING_VALUES)[number];
const LARGEST_SEED = 2 ** 31 - 1;
/** What “all” holes means: longer than any rim in a file that is read. */
const longestRimMm = 1e9;

/** What the words after the program's name ask for. Throws a UsageError with one sentence. */
export function parseArguments(words: readonly string[]): Command {
  if (words.includes('--help') || words.includes('-h')) return { kind: 'help' };
  const { names, values, json, accept } = sortWords(words);
  const [verb, modelPath, ...more] = names;
  if (verb !== 'plan')
    throw new UsageError(
      verb === undefined
        ? 'Say what to do, for example: plan MODEL.stl --envelope 220x220x250 (--help shows everything).'
        : `“${verb}” is not a command; the one there is, is: plan (--help shows everything).`,
    );
  if (modelPath === undefined) throw new UsageError('Name the file to plan after “plan”.');
  return naming(modelPath, () => {
    if (more.length > 0) throw new UsageError(`“${more[0]}” is one file too many`);
    const envelope = values.get('--envelope');
    if (envelope === undefined)
      throw new UsageError('the envelope is missing, for example --envelope 220x220x250');
    return {
      kind: 'plan',
      modelPath,
      spaces: parseEnvelopes(envelope, values.get('--margin') ?? '0'),
      wishesPath: values.get('--wishes') ?? null,
      jointsPath: values.get('--joints') ?? null,
      material: values.get('--material') ?? null,
      seed: parseSeed(values.get('--seed') ?? '1'),
      millimetresPerUnit: given(values.get('--unit'), parseUnit),
      fillHolesUpToMm: given(values.get('--fill-holes'), parseRim),
      remeshCells: given(values.get('--remesh'), parseCells),
      parts: given(values.get('--parts'), parseParts),
      accept,
      outFolder: values.get('--out') ?? null,
      json,
    };
  });
}

function given<V>(text: string | undefined, read: (text: string) => V): V | null {
  return text === undefined ? null : read(text);
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
  let accept = false;
  for (let i = 0; i < words.length; i++) {
    const word = words[i];
    const equals = word.indexOf('=');
    const name = word.startsWith('--') && equals > 0 ? word.slice(0, equals) : word;
    if (word === '--json') json = true;
    else if (word === '--accept') accept = true;
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
  return { names, values, json, accept };
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

function parseRim(text: string): number {
  if (text === 'all') return longestRimMm;
  const lengthMm = /^\d+(\.\d+)?$/.test(text) ? Number(text) : NaN;
  if (lengthMm > 0 && lengthMm <= 1e6) return lengthMm;
  throw new UsageError(
    `the rim length “${text}” is neither “all” nor a number of millimetres above 0 and up to 1000000`,
  );
}

function parseCells(text: string): number {
  const cells = /^\d+$/.test(text) ? Number(text) : NaN;
  if (cells >= fewestRemeshCells && cells <= mostRemeshCells) return cells;
  throw new UsageError(
    `the grid “${text}” is not a whole number of cells from ${fewestRemeshCells} to ${mostRemeshCells}`,
  );
}

/** People count parts from 1. */
function parseParts(text: string): number[] {
  const numbers = text.split(',').map((part) => (/^\d{1,6}$/.test(part) ? Number(part) : 0));
  if (numbers.every((number) => number >= 1)) return numbers.map((number) => number - 1);
  throw new UsageError(`the parts “${text}” are not whole numbers from 1, parted by commas`);
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
