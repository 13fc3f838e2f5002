const powersOfTen = Float64Array.from({ length: 23 }, (_, i) => Number(`1e${i}`));
/** Integers up to this are exact in a double, so one multiplication by an exact power of ten rounds once. */
const largestExactInteger = 2 ** 53;
/** No program writes longer numbers; a longer word is damage and must not become a string. */
const longestNumber = 400;

/** Letters of a word for `isAt`, lower case. */
export function lettersOf(word: string): Uint8Array {
  return Uint8Array.from(word, (letter) => letter.charCodeAt(0));
}

/**
 * Walks through text as bytes, word by word. Space and every control character are blank, so all
 * habits of ending lines and files are the same to it. Makes no strings, except for the rare number
 * that needs the engine's own rounding.
 */
export class AsciiCursor {
  /** First byte of the current word. */
  start: number;
  /** First byte after it. */
  end: number;

  constructor(
    readonly bytes: Uint8Array,
    from: number,
  ) {
    this.start = from;
    this.end = from;
  }

  /** Moves to the next word. Returns whether there was one. */
  next(): boolean {
    const { bytes } = this;
    const { length } = bytes;
    let i = this.end;
    while (i < length && isBlank(bytes[i])) i++;
    this.start = i;
    while (i < length && !isBlank(bytes[i])) i++;
    this.end = i;
    return i > this.start;
  }

  /** Moves behind the end of the current line (CR, LF, or both in either order). */
  skipLine(): void {
    const { bytes } = this;
    let i = this.end;
    while (i < bytes.length && bytes[i] !== 10 && bytes[i] !== 13) i++;
    this.end = i;
    this.start = i;
  }

  /** Whether the current word is this one, in any case. */
  isAt(letters: Uint8Array): boolean {
    const { bytes, start } = this;
    if (this.end - start !== letters.length) return false;
    for (let i = 0; i < letters.length; i++)
      if ((bytes[start + i] | 0x20) !== letters[i]) return false;
    return true;
  }

  /**
   * The current word as a number, correctly rounded to a double. Spelled-out not-a-numbers and
   * infinities count as such. `undefined` when the word is no number.
   */
  number(): number | undefined {
    const { bytes, start, end } = this;
    if (end - start > longestNumber) return undefined;
    let i = start;
    const sign = bytes[i];
    if (sign === 45 || sign === 43) i++;
    let mantissa = 0;
    let digits = 0;
    let scale = 0;
    for (; i < end; i++) {
      const digit = bytes[i] - 48;
      if (digit < 0 || digit > 9) break;
      mantissa = mantissa * 10 + digit;
      digits++;
    }
    if (i < end && bytes[i] === 46) {
      const point = ++i;
      for (; i < end; i++) {
        const digit = bytes[i] - 48;
        if (digit < 0 || digit > 9) break;
        mantissa = mantissa * 10 + digit;
        digits++;
      }
      scale = point - i;
    }
    if (digits === 0) return this.wordForNoNumber(i);
    if (i < end) {
      // An old C library writes 1.#QNAN, 1.#INF.
      if (bytes[i] === 35) return NaN;
      if ((bytes[i] | 0x20) !== 101) return undefined;
      let e = i + 1;
      const exponentSign = e < end ? bytes[e] : 0;
      if (exponentSign === 45 || exponentSign === 43) e++;
      if (e === end) return undefined;
      let exponent = 0;
      for (; e < end; e++) {
        const digit = bytes[e] - 48;
        if (digit < 0 || digit > 9) return undefined;
        if (exponent < 100_000) exponent = exponent * 10 + digit;
      }
      scale += exponentSign === 45 ? -exponent : exponent;
    }
    if (mantissa > largestExactInteger || scale > 22 || scale < -22)
      return Number(this.word(end - start));
    const magnitude = scale < 0 ? mantissa / powersOfTen[-scale] : mantissa * powersOfTen[scale];
    return sign === 45 ? -magnitude : magnitude;
  }

  private wordForNoNumber(from: number): number | undefined {
    const word = this.word(20)
      .slice(from - this.start)
      .toLowerCase();
    if (/^(?:nan|qnan|snan|ind)/.test(word)) return NaN;
    return /^inf(?:inity)?$/.test(word) ? Infinity : undefined;
  }

  /** The current word for a message, cut after `longest` bytes; other bytes than printable ASCII show as `?`. */
  word(longest: number): string {
    let word = '';
    for (let i = this.start; i < this.end && i < this.start + longest; i++)
      word += this.bytes[i] > 32 && this.bytes[i] < 127 ? String.fromCharCode(this.bytes[i]) : '?';
    return word;
  }

  /** Line of the current word, from 1. Counts from the top: for messages only. */
  line(): number {
    let line = 1;
    for (let i = 0; i < this.start; i++) {
      const byte = this.bytes[i];
      if (byte === 10 || (byte === 13 && this.bytes[i + 1] !== 10)) line++;
    }
    return line;
  }
}

function isBlank(byte: number): boolean {
  return byte <= 32;
}
