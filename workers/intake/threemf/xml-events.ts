import { SaxesParser } from 'saxes';
import { JobRefusal } from '../../runtime/job-refusal.js';
import { refuseFile } from '../refusal-words.js';

/** Limits against documents made to fill the memory. Own choice. */
const deepest = 64;
const longestAttribute = 64 * 1024;
const sliceBytes = 1 << 16;

export interface ElementListener {
  /** Names without their prefix; attributes by local name too. */
  readonly open: (name: string, attributes: ReadonlyMap<string, string>) => void;
  readonly close: (name: string) => void;
  /** Prefixes and what they stand for, of the root element. */
  readonly namespaces?: (prefixes: ReadonlyMap<string, string>) => void;
}

/**
 * Reads an XML part element by element. Entities of a document type are never expanded: a document
 * that declares one is refused. Throws a JobRefusal on XML that is not well formed.
 */
export function readXml(
  bytes: Uint8Array,
  fileName: string,
  listener: ElementListener,
  onProgress: (fraction: number) => void = () => {},
): void {
  const parser = new SaxesParser();
  const open: string[] = [];
  parser.on('error', (error) => {
    // The parser's messages begin with line and column.
    const [, line] = /^(\d+):\d+:/.exec(error.message) ?? [];
    const where = line ? ` in line ${line}` : '';
    throw refuseFile(fileName, `holds XML that is not well formed${where}. It is damaged.`);
  });
  parser.on('doctype', () => {
    throw refuseFile(
      fileName,
      'holds a document type declaration, which a 3MF file must not have.',
    );
  });
  parser.on('opentag', (tag) => {
    if (open.length >= deepest)
      throw refuseFile(fileName, 'nests its XML too deeply. It is damaged or made to do harm.');
    const attributes = new Map<string, string>();
    const prefixes = new Map<string, string>();
    for (const [name, value] of Object.entries(tag.attributes as Record<string, string>)) {
      if (value.length > longestAttribute)
        throw refuseFile(fileName, 'holds an XML attribute of absurd length. It is damaged.');
      if (name.startsWith('xmlns:')) prefixes.set(name.slice(6), value);
      else attributes.set(localName(name), value);
    }
    if (open.length === 0) listener.namespaces?.(prefixes);
    const name = localName(tag.name);
    open.push(name);
    listener.open(name, attributes);
  });
  parser.on('closetag', () => listener.close(open.pop() ?? ''));
  const decoder = new TextDecoder('utf-8', { fatal: true });
  try {
    for (let from = 0; from < bytes.length; from += sliceBytes) {
      const isLast = from + sliceBytes >= bytes.length;
      parser.write(decoder.decode(bytes.subarray(from, from + sliceBytes), { stream: !isLast }));
      onProgress(from / bytes.length);
    }
    parser.close();
  } catch (error) {
    if (error instanceof JobRefusal) throw error;
    if (error instanceof TypeError)
      throw refuseFile(fileName, 'holds XML that is not UTF-8 text. It is damaged.');
    throw error;
  }
}

function localName(name: string): string {
  const colon = name.indexOf(':');
  return colon < 0 ? name : name.slice(colon + 1);
}
