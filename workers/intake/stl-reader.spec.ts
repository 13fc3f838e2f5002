import { describe, expect, it } from 'vitest';
import { randomInteger, seededRandom } from '../../test/support/random.js';
import { sphere, toSoup } from '../../test/support/shapes.js';
import { asciiStl, asciiText, binaryStl, reversedBinaryStl } from '../../test/support/stl-files.js';
import { JobRefusal } from '../runtime/job-refusal.js';
import { readStl } from './stl-reader.js';

const soup = toSoup(sphere(50, 24, 12).mesh);
const facets = soup.length / 9;
const text = asciiText(soup);
const encode = (content: string) => new TextEncoder().encode(content);

function refusalOf(bytes: Uint8Array, fileName = 'prop.stl'): string {
  try {
    readStl(bytes, fileName);
  } catch (error) {
    if (error instanceof JobRefusal) return error.message;
    throw error;
  }
  throw new Error('The file was not refused.');
}

function expectSound(bytes: Uint8Array, format: 'stl-binary' | 'stl-ascii', notes: RegExp[] = []) {
  const reading = readStl(bytes, 'prop.stl');
  expect(reading.format).toBe(format);
  expect(reading.facetsRead).toBe(facets);
  expect(toSoup(reading.mesh)).toEqual(soup.map((value) => value + 0));
  expect(reading.degenerateDropped).toBe(0);
  expect(reading.notes.length).toBe(notes.length);
  notes.forEach((note, i) => expect(reading.notes[i]).toMatch(note));
}

describe('reading a binary STL', () => {
  it('gives back every coordinate bit by bit', () => {
    expectSound(binaryStl(soup), 'stl-binary');
  });

  it('does not care where in memory the file begins', () => {
    const file = binaryStl(soup);
    for (const shift of [1, 2, 3, 5]) {
      const moved = new Uint8Array(file.length + shift);
      moved.set(file, shift);
      expectSound(moved.subarray(shift), 'stl-binary');
    }
  });

  it('goes by the size when the header begins with "solid"', () => {
    expectSound(binaryStl(soup, { header: 'solid exported by a machine' }), 'stl-binary');
    expectSound(binaryStl(soup, { header: 'solid \xff\xfe broken letters' }), 'stl-binary');
  });

  it('leaves trailing bytes alone and says so', () => {
    for (const length of [1, 36, 49, 137])
      expectSound(binaryStl(soup, { trailing: new Uint8Array(length).fill(7) }), 'stl-binary', [
        new RegExp(`goes on for ${length} byte`),
      ]);
    expectSound(binaryStl(soup, { trailing: new Uint8Array(500) }), 'stl-binary', [/500 bytes/]);
  });

  it('refuses a count larger than the file, with both numbers', () => {
    expect(refusalOf(binaryStl(soup, { count: facets + 1000 }))).toBe(
      `“prop.stl” says that it holds 1 528 facets but ends after 528. It was cut off while being saved or sent, or its count is wrong.`,
    );
  });

  it('refuses a file cut off at any place', () => {
    const file = binaryStl(soup);
    for (const length of [84, 100, 134, 200, 1000, file.length - 50, file.length - 1])
      expect(refusalOf(file.slice(0, length))).toMatch(/says that it holds 528 facets but/);
  });

  it('refuses whole facets beyond the count, because either may be wrong', () => {
    expect(refusalOf(binaryStl(soup, { count: facets - 100 }))).toMatch(
      /says that it holds 428 facets but holds 528/,
    );
  });

  it('does not reserve memory for a count without data', () => {
    expect(refusalOf(binaryStl([], { count: 4294967295 }))).toMatch(
      /4 294 967 295 facets but holds none/,
    );
  });

  it('refuses a file without facets', () => {
    expect(refusalOf(binaryStl([]))).toMatch(/without a single facet/);
  });

  it('counts coordinates that are not numbers or far too large', () => {
    const damaged = soup.slice();
    damaged[9 * 100 + 4] = NaN;
    damaged[9 * 200 + 1] = -Infinity;
    expect(refusalOf(binaryStl(damaged))).toMatch(/2 coordinates that are not .* facet 101\./);
    const huge = soup.slice();
    huge[5] = -1.5e7;
    expect(refusalOf(binaryStl(huge))).toMatch(/1 coordinate beyond .* facet 1\./);
    huge[5] = 1e7;
    expect(readStl(binaryStl(huge), 'prop.stl').facetsRead).toBe(facets);
  });

  it('turns reversed byte order round and says so', () => {
    expectSound(reversedBinaryStl(soup), 'stl-binary', [/reversed byte order/]);
  });

  it('reports progress that never falls', () => {
    const seen: number[] = [];
    const many = new Float32Array(9 * 200_000).fill(1);
    readStl(binaryStl(many), 'prop.stl', (fraction) => seen.push(fraction));
    expect(seen.length).toBeGreaterThan(2);
    expect(seen).toEqual([...seen].sort((a, b) => a - b));
    expect(seen.at(-1)).toBeLessThanOrEqual(1);
  });
});

describe('reading an ASCII STL', () => {
  it('rounds every number as the float32 it stands for', () => {
    expectSound(asciiStl(soup), 'stl-ascii');
  });

  it('takes any case, line end and blank, and a byte order mark', () => {
    expectSound(encode(text.toUpperCase().replaceAll(' ', '\t')), 'stl-ascii');
    expectSound(encode(text.replaceAll('\n', '\r')), 'stl-ascii');
    expectSound(encode(text.replaceAll('\n', '\r\n')), 'stl-ascii');
    expectSound(encode('\ufeff\n ' + text), 'stl-ascii');
    expectSound(encode(text + '\x1a'), 'stl-ascii');
  });

  it('passes over names of any letters, also such as look like keywords', () => {
    expectSound(asciiStl(soup, '月 – facet normal endsolid'), 'stl-ascii');
    const broken = encode(text);
    broken[6] = 0xff;
    expectSound(broken, 'stl-ascii');
  });

  it('joins several solids and leaves empty ones out of the count', () => {
    const half = 9 * Math.floor(facets / 2);
    const both = asciiText(soup.slice(0, half), 'One') + asciiText(soup.slice(half), 'two');
    expectSound(encode('solid empty\nendsolid empty\n' + both), 'stl-ascii', [/holds 2 solids/]);
  });

  it('says when the closing line is missing', () => {
    expectSound(encode(text.replace(/endsolid.*/, '')), 'stl-ascii', [/closing line/]);
  });

  it('refuses a file that ends inside a facet, wherever that is', () => {
    const body = text.slice(0, text.lastIndexOf('endfacet') + 'endfacet'.length);
    for (let cut = 1; cut < 700; cut++) {
      const rest = body.slice(0, body.length - cut);
      if (/endfacet\s*$/.test(rest)) continue;
      expect(refusalOf(encode(rest))).toMatch(
        /^“prop.stl” ends in .* It was cut off while being saved or sent\.$/,
      );
    }
  });

  it('refuses decimal commas, quads and words, naming the line', () => {
    expect(refusalOf(encode(text.replaceAll('.', ',')))).toMatch(
      /decimal comma \(“.*,.*” in line 4\)/,
    );
    const corner = text.split('\n')[3]!;
    expect(refusalOf(encode(text.replace(corner, `${corner}\n${corner}`)))).toMatch(
      /facet of 4 corners/,
    );
    expect(refusalOf(encode(text.replace('endloop', 'endlop')))).toMatch(/“endlop” in line 7/);
    expect(refusalOf(encode(text.replace('vertex', 'vertex x')))).toMatch(
      /“x” in line 4 where a number/,
    );
  });

  it('counts numbers that overflow or are spelled out as none', () => {
    const corner = /vertex \S+/g;
    for (const word of ['1e400', 'nan', '-NaN', '-nan(ind)', '1.#QNAN', 'inf', '-Infinity']) {
      let left = 3;
      const damaged = text.replace(corner, (found) => (left-- > 0 ? `vertex ${word}` : found));
      expect(refusalOf(encode(damaged))).toMatch(/3 coordinates that are not .* facet 1\./);
    }
    expect(refusalOf(encode(text.replace(/vertex \S+/, 'vertex 1e20')))).toMatch(
      /1 coordinate beyond/,
    );
  });

  it('refuses a number of a million digits without making it a string', () => {
    expect(refusalOf(encode(text.replace(/vertex \S+/, `vertex ${'1'.repeat(1e6)}`)))).toMatch(
      /where a number should stand/,
    );
  });

  it('reads a solid without facets as a refusal', () => {
    expect(refusalOf(encode('solid empty\nendsolid empty\n'))).toMatch(/without a single facet/);
  });

  const seed = 20_611;
  it(`reads 20 000 spelled numbers as the engine does (seed ${seed})`, () => {
    const random = seededRandom(seed);
    const digits = (count: number) =>
      Array.from({ length: count }, () => String(randomInteger(random, 10))).join('');
    const words = Array.from({ length: 20_007 }, (_, i) => {
      const sign = ['', '-', '+'][randomInteger(random, 3)]!;
      const whole = digits(1 + randomInteger(random, 5));
      const part = random() < 0.8 ? `.${digits(randomInteger(random, 18))}` : '';
      const exponent =
        random() < 0.5 ? `e${['', '-', '+'][randomInteger(random, 3)]}${digits(1)}` : '';
      const word = `${sign}${whole}${part}${exponent}`;
      return Math.abs(Number(word)) < 1e7 ? word : String(i);
    });
    const lines: string[] = ['solid numbers'];
    for (let i = 0; i < words.length; i += 9) {
      const corners = [0, 3, 6].map((k) => `vertex ${words.slice(i + k, i + k + 3).join(' ')}`);
      lines.push(`facet normal 0 0 0 outer loop ${corners.join(' ')} endloop endfacet`);
    }
    const { mesh } = readStl(encode([...lines, 'endsolid'].join('\n')), 'numbers.stl');
    // -0 is read as 0.
    expect(toSoup(mesh)).toEqual(Float32Array.from(words, (word) => Number(word) + 0));
  });
});

describe('files that are no STL', () => {
  it('says what they are instead', () => {
    expect(refusalOf(new Uint8Array(0))).toBe('“prop.stl” is empty.');
    expect(refusalOf(new Uint8Array(83).fill(1))).toMatch(
      /too short to be an STL file \(83 bytes\)/,
    );
    expect(refusalOf(encode('<!DOCTYPE html><html><body>Not found</body></html>'))).toMatch(
      /web page/,
    );
    expect(refusalOf(Uint8Array.from([0x1f, 0x8b, 8, ...new Array(400).fill(9)]))).toMatch(/gzip/);
    expect(refusalOf(encode('v 0 0 0\nv 1 0 0\nf 1 2 3\n'.repeat(20)))).toMatch(
      /text file, but not/,
    );
    const random = seededRandom(7);
    const noise = Uint8Array.from({ length: 10_000 }, () => randomInteger(random, 256));
    expect(refusalOf(noise)).toMatch(/not an STL file, neither binary nor text/);
  });

  it('never shows a path, a control character or an endless name', () => {
    const sentence = refusalOf(new Uint8Array(0), `../../etc/\u0007${'a'.repeat(300)}.stl`);
    expect(sentence).not.toContain('etc');
    expect(sentence).not.toContain('\u0007');
    expect(sentence.length).toBeLessThan(80);
    expect(refusalOf(new Uint8Array(0), '')).toBe('“the file” is empty.');
  });
});
