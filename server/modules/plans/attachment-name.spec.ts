import { describe, expect, it } from 'vitest';
import { attachmentHeader } from './attachment-name.js';

const realName = (header: string) =>
  decodeURIComponent(/filename\*=UTF-8''(\S+)$/.exec(header)?.[1] ?? '');
const plainName = (header: string) => /filename="([^"]*)"/.exec(header)?.[1];

describe('attachmentHeader', () => {
  it.each([
    ['heron plan 1.zip', 'heron plan 1.zip', 'heron plan 1.zip'],
    ['Glöcke ⌀ 3.zip', 'Glöcke ⌀ 3.zip', 'Glocke  3.zip'],
    ['../../etc/pass"wd.zip', '-..-etc-pass-wd.zip', '-..-etc-pass-wd.zip'],
    ['a\r\nSet-Cookie: x=1', 'a-Set-Cookie- x=1', 'a-Set-Cookie- x=1'],
    ["it's (50%).zip", "it's (50%).zip", 'its (50).zip'],
    ['鶴', '鶴', 'download'],
  ])('names %j safely', (name, real, plain) => {
    const header = attachmentHeader(name);
    expect(realName(header)).toBe(real);
    expect(plainName(header)).toBe(plain);
    expect(header).toMatch(/^[\x20-\x7e]+$/);
  });
});
