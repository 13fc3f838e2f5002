import { weldIndexed } from '../indexed-mesh.js';
import type { MeshReading } from '../mesh-reading.js';
import { countOf, refuseFile } from '../refusal-words.js';
import { type FindObject, ItemAssembler } from './assemble-items.js';
import { type ModelPart, readModelPart } from './model-part.js';
import { readXml } from './xml-events.js';
import { readZipEntries } from './zip-entries.js';

export { isZip } from './zip-entries.js';

/** 3MF Core 1.4.0, 3.4 "Model": units and what they are in millimetres. */
const units: Readonly<Record<string, number>> = {
  micron: 0.001,
  millimeter: 1,
  centimeter: 10,
  inch: 25.4,
  foot: 304.8,
  meter: 1000,
};
/** 3MF Core 1.4.0, 2.1: the relationship that leads to the model part. */
const startPart = 'http://schemas.microsoft.com/3dmanufacturing/2013/01/3dmodel';
const relationships = '_rels/.rels';
const usualModelPart = '3D/3dmodel.model';

/**
 * Reads a 3MF file (Core specification 1.4.0, 3MF Consortium, 2025; paths of the production extension
 * are followed): every build item, or those chosen, with components and transforms, in one mesh.
 * Items are the parts. Throws a JobRefusal with a sentence on anything that cannot be read as a whole.
 */
export function readThreeMf(
  bytes: Uint8Array,
  fileName: string,
  chosen: readonly number[] | null,
  onProgress: (fraction: number) => void,
): MeshReading {
  const start = performance.now();
  const isPart = (name: string) => name === relationships || /\.model$/i.test(name);
  const entries = readZipEntries(bytes, fileName, isPart, (share) => onProgress(0.2 * share));
  const root = rootPart(entries, fileName);
  const parts = new Map<string, ModelPart>();
  const part = (path: string): ModelPart => {
    const known = parts.get(path);
    if (known) return known;
    const content = entries.get(path);
    if (!content)
      throw refuseFile(fileName, `lacks its part “${path.slice(0, 40)}”. It is damaged.`);
    const read = readModelPart(content, fileName, (share) => onProgress(0.2 + 0.7 * share));
    parts.set(path, read);
    return read;
  };
  const { items, unit } = part(root);
  if (items.length === 0) throw refuseFile(fileName, 'is a 3MF file with nothing in its build.');
  const find: FindObject = (use, from) => {
    const path = use.path === null ? from : use.path.replace(/^\/+/, '');
    const object = part(path).objects.get(use.objectId);
    if (!object)
      throw refuseFile(
        fileName,
        `uses an object (${use.objectId.slice(0, 20)}) that it does not hold. It is damaged.`,
      );
    return { object, part: path };
  };

  const assembler = new ItemAssembler(find, fileName);
  const listed = items.map((item, number) => {
    const isTaken = chosen === null || chosen.includes(number);
    const { name } = find(item, root).object;
    const facets = isTaken ? assembler.add(item, root) : countFacets(find, item, root, fileName);
    return { name: name || item.partNumber.slice(0, 60) || `Item ${number + 1}`, facets, isTaken };
  });
  const indices = assembler.indices.view();
  if (indices.length === 0) throw refuseFile(fileName, 'is a 3MF file without a single triangle.');
  const parsed = performance.now();
  const welded = weldIndexed(assembler.positions.view().slice(), indices);
  onProgress(1);
  const millimetres = units[unit];
  if (millimetres === undefined)
    throw refuseFile(fileName, `states the unit “${unit.slice(0, 20)}”, which 3MF does not know.`);
  return {
    ...welded,
    format: '3mf',
    facetsRead: indices.length / 3,
    fileUnit: { name: unit, millimetres },
    parts: listed.length > 1 ? listed : [],
    notes: notesOf(assembler.skipped),
    timingsMs: { parse: parsed - start, weld: performance.now() - parsed },
  };
}

function countFacets(
  find: FindObject,
  item: ModelPart['items'][number],
  root: string,
  fileName: string,
): number {
  return new ItemAssembler(find, fileName).add(item, root);
}

function notesOf(skipped: number): string[] {
  if (skipped === 0) return [];
  return [
    `${countOf(skipped, 'object')} of the file ${skipped === 1 ? 'is' : 'are'} marked as support or as not part of the model and ${skipped === 1 ? 'was' : 'were'} passed over.`,
  ];
}

/** The model part that the package names first, or the usual one. */
function rootPart(entries: ReadonlyMap<string, Uint8Array>, fileName: string): string {
  let target: string | null = null;
  const content = entries.get(relationships);
  if (content)
    readXml(content, fileName, {
      open: (name, attributes) => {
        if (name === 'Relationship' && attributes.get('Type') === startPart)
          target ??= attributes.get('Target')?.replace(/^\/+/, '') ?? null;
      },
      close: () => {},
    });
  const path = target ?? usualModelPart;
  if (!entries.has(path))
    throw refuseFile(
      fileName,
      content
        ? 'is a 3MF file that lacks its model. It is damaged.'
        : 'is a ZIP archive, but not a 3MF file. Unpack it and bring the model inside.',
    );
  return path;
}
