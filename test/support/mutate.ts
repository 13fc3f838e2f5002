import { strFromU8, strToU8, unzipSync, zipSync } from 'fflate';
import { randomInteger } from './random.js';

type Random = () => number;

/** Damages bytes in one to four ways: flips, changes, cuts, insertions, doubled and swapped spans. */
export function mutateBytes(original: Uint8Array, random: Random): Uint8Array {
  let bytes = original;
  for (let hits = 1 + randomInteger(random, 4); hits > 0; hits--)
    bytes = byteDamages[randomInteger(random, byteDamages.length)]!(bytes, random);
  return bytes;
}

const byteDamages: readonly ((bytes: Uint8Array, random: Random) => Uint8Array)[] = [
  (bytes, random) => {
    const copy = bytes.slice();
    const at = randomInteger(random, Math.max(1, copy.length));
    if (copy.length > 0) copy[at]! ^= 1 << randomInteger(random, 8);
    return copy;
  },
  (bytes, random) => {
    const copy = bytes.slice();
    for (let i = 0; i < 4 && copy.length > 0; i++)
      copy[randomInteger(random, copy.length)] = randomInteger(random, 256);
    return copy;
  },
  (bytes, random) => bytes.slice(0, randomInteger(random, bytes.length + 1)),
  (bytes, random) => bytes.slice(randomInteger(random, 40)),
  (bytes, random) => {
    const added = Uint8Array.from({ length: randomInteger(random, 60) }, () =>
      randomInteger(random, 256),
    );
    return splice(bytes, randomInteger(random, bytes.length + 1), 0, added);
  },
  (bytes, random) => {
    const from = randomInteger(random, bytes.length + 1);
    const span = bytes.slice(from, from + randomInteger(random, 200));
    return splice(bytes, randomInteger(random, bytes.length + 1), 0, span);
  },
  (bytes, random) =>
    splice(
      bytes,
      randomInteger(random, bytes.length + 1),
      randomInteger(random, 60),
      new Uint8Array(0),
    ),
  (bytes, random) => {
    // Numbers that files state about themselves: often four bytes.
    const copy = bytes.slice();
    if (copy.length < 88) return copy;
    const view = new DataView(copy.buffer);
    const at = random() < 0.5 ? 80 : randomInteger(random, copy.length - 4);
    const odd = [0, 1, 0x7fffffff, 0x80000000, 0xffffffff, 0x7fc00000, 0x7f800000];
    view.setUint32(at, odd[randomInteger(random, odd.length)]!, true);
    return copy;
  },
];

function splice(bytes: Uint8Array, at: number, drop: number, add: Uint8Array): Uint8Array {
  const rest = bytes.subarray(Math.min(bytes.length, at + drop));
  const result = new Uint8Array(at + add.length + rest.length);
  result.set(bytes.subarray(0, at));
  result.set(add, at);
  result.set(rest, at + add.length);
  return result;
}

const oddWords = [
  ...[
    'nan',
    'inf',
    '-',
    '',
    '1e400',
    '-1e39',
    '0x10',
    '1,5',
    '99999999999999999999',
    '-0',
    '1e-320',
  ],
  ...[
    'vertex',
    'endloop',
    'facet',
    'f',
    'v',
    '-1',
    '0',
    '1/2/3',
    '//',
    '\\',
    '#',
    '<',
    '&lt;',
    '"',
  ],
];

/** Damages text word by word: numbers, keywords, order of lines, line ends. */
export function mutateText(original: Uint8Array, random: Random): Uint8Array {
  let text = strFromU8(original);
  for (let hits = 1 + randomInteger(random, 3); hits > 0; hits--) {
    const words = text.split(/(\s+)/);
    const at = randomInteger(random, Math.max(1, words.length));
    switch (randomInteger(random, 6)) {
      case 0:
        words[at] = oddWords[randomInteger(random, oddWords.length)]!;
        break;
      case 1:
        words.splice(at, 1 + randomInteger(random, 8));
        break;
      case 2:
        words.splice(at, 0, ...words.slice(at, at + 2 + randomInteger(random, 12)));
        break;
      case 3:
        words[at] = (words[at] ?? '').split('').reverse().join('');
        break;
      case 4: {
        const lines = text.split('\n');
        const [one, other] = [
          randomInteger(random, lines.length),
          randomInteger(random, lines.length),
        ];
        [lines[one], lines[other]] = [lines[other]!, lines[one]!];
        words.splice(0, words.length, lines.join('\n'));
        break;
      }
      default:
        words.splice(
          0,
          words.length,
          text.replaceAll('\n', ['\r', '\r\n', ' ', '\t'][randomInteger(random, 4)]!),
        );
    }
    text = words.join('');
  }
  return random() < 0.3 ? mutateBytes(strToU8(text), random) : strToU8(text);
}

const oddValues = [
  ...['', '-1', '0', '1e9', 'NaN', '1 0 0', 'x', '999999999', '&amp;', '1e-400', '2147483648'],
  ...['1 0 0 0 1 0 0 0 1 0 0', '0 0 0 0 0 0 0 0 0 0 0 0', '1e300 0 0 0 1 0 0 0 1 0 0 1e300'],
];

/** Damages the XML parts of a ZIP package and packs them again, or the bytes of the package. */
export function mutatePackage(original: Uint8Array, random: Random): Uint8Array {
  if (random() < 0.35) return mutateBytes(original, random);
  const parts = unzipSync(original);
  const names = Object.keys(parts);
  const name = names[randomInteger(random, names.length)]!;
  let xml = strFromU8(parts[name]!);
  for (let hits = 1 + randomInteger(random, 3); hits > 0; hits--) xml = mutateXml(xml, random);
  if (random() < 0.05) delete parts[name];
  else
    parts[name] =
      random() < 0.15 ? new Uint8Array(mutateBytes(strToU8(xml), random)) : strToU8(xml);
  return zipSync(parts, { level: random() < 0.2 ? 0 : 1 });
}

function mutateXml(xml: string, random: Random): string {
  const attributes = [...xml.matchAll(/="[^"]*"/g)];
  const tags = [...xml.matchAll(/<[^>]*>/g)];
  const one = attributes[randomInteger(random, Math.max(1, attributes.length))];
  const tag = tags[randomInteger(random, Math.max(1, tags.length))];
  if (!one || !tag) return xml;
  const odd = oddValues[randomInteger(random, oddValues.length)]!;
  switch (randomInteger(random, 6)) {
    case 0:
      return xml.slice(0, one.index) + `="${odd}"` + xml.slice(one.index + one[0].length);
    case 1:
      return xml.slice(0, tag.index) + xml.slice(tag.index + tag[0].length);
    case 2:
      return (
        xml.slice(0, tag.index) +
        tag[0].repeat(2 + randomInteger(random, 3)) +
        xml.slice(tag.index + tag[0].length)
      );
    case 3:
      return xml.slice(0, randomInteger(random, xml.length));
    case 4: {
      const other = attributes[randomInteger(random, attributes.length)]!;
      return xml.slice(0, one.index) + other[0] + xml.slice(one.index + one[0].length);
    }
    default:
      return xml.slice(0, tag.index) + '&a;' + xml.slice(tag.index);
  }
}
