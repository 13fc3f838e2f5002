import { describe, expect, it } from 'vitest';
import { parseArguments } from './parse-arguments.js';

const plan = (...words: string[]) => parseArguments(['plan', 'cube.stl', ...words]);
const complaint = (...words: string[]) => {
  try {
    parseArguments(words);
  } catch (error) {
    return (error as Error).message;
  }
  return 'no complaint';
};

describe('parseArguments', () => {
  it('takes a rectangular envelope with its defaults', () => {
    expect(plan('--envelope', '220x220x250')).toEqual({
      kind: 'plan',
      modelPath: 'cube.stl',
      spaces: [{ shape: 'rectangular', widthMm: 220, depthMm: 220, heightMm: 250 }],
      wishesPath: null,
      jointsPath: null,
      material: null,
      seed: 1,
      millimetresPerUnit: null,
      fillHolesUpToMm: null,
      remeshCells: null,
      parts: null,
      accept: false,
      outFolder: null,
      json: false,
    });
  });

  it('takes what a person decided about a broken file', () => {
    expect(
      plan('--envelope=9x9x9', '--fill-holes', '12.5', '--remesh=300', '--parts=1,3', '--accept'),
    ).toMatchObject({ fillHolesUpToMm: 12.5, remeshCells: 300, parts: [0, 2], accept: true });
    expect(plan('--envelope=9x9x9', '--fill-holes=all')).toMatchObject({ fillHolesUpToMm: 1e9 });
  });

  it.each([
    [['--fill-holes', 'some'], /the rim length “some” is neither “all” nor a number/],
    [['--remesh', '20'], /the grid “20” is not a whole number of cells from 50 to 800/],
    [['--parts', '0,1'], /the parts “0,1” are not whole numbers from 1/],
  ])('refuses %j', (words, sentence) => {
    expect(complaint('plan', 'cube.stl', '--envelope', '9x9x9', ...words)).toMatch(sentence);
  });

  it('takes the margin off every side of the bed and not off the height', () => {
    expect(plan('--envelope=220.5x200x250', '--margin=5')).toMatchObject({
      spaces: [{ shape: 'rectangular', widthMm: 210.5, depthMm: 190, heightMm: 250 }],
    });
    expect(plan('--envelope', 'round:300X400', '--margin', '10')).toMatchObject({
      spaces: [{ shape: 'round', diameterMm: 280, heightMm: 400 }],
    });
    expect(plan('--envelope', '100x100x100+round:300x400', '--margin', '10')).toMatchObject({
      spaces: [
        { shape: 'rectangular', widthMm: 80, depthMm: 80, heightMm: 100 },
        { shape: 'round', diameterMm: 280, heightMm: 400 },
      ],
    });
    expect(complaint('plan', 'a.stl', '--envelope', Array(9).fill('1x1x1').join('+'))).toMatch(
      /at most 8 envelopes/,
    );
  });

  it('takes seed, unit, folder and --json in any order', () => {
    const words = ['--json', '--out', 'pieces here', 'plan', '--seed', '7', 'a b.stl'];
    expect(parseArguments([...words, '--unit', 'inch', '--envelope', '1x1x1'])).toMatchObject({
      modelPath: 'a b.stl',
      seed: 7,
      millimetresPerUnit: 25.4,
      outFolder: 'pieces here',
      json: true,
    });
    expect(plan('--envelope', '1x1x1', '--unit', '1000')).toMatchObject({
      millimetresPerUnit: 1000,
    });
  });

  it('answers --help whatever else is there', () => {
    expect(parseArguments(['plan', '--bogus', '--help'])).toEqual({ kind: 'help' });
  });

  it.each([
    ['a side of 0', ['--envelope', '0x220x250'], /width of 0 mm/],
    ['a negative side', ['--envelope', '220x-5x250'], /depth of -5 mm/],
    ['a side over 10 m', ['--envelope', '220x220x10001'], /height of 10001 mm/],
    ['a round bed of 0', ['--envelope', 'round:0x250'], /diameter of 0 mm/],
    ['two sides', ['--envelope', '220x220'], /not of the form/],
    ['words', ['--envelope', 'big'], /not of the form/],
    ['no envelope', [], /the envelope is missing/],
    [
      'a margin that leaves nothing',
      ['--envelope', '20x30x40', '--margin', '10'],
      /leaves no room/,
    ],
    ['a negative margin', ['--envelope', '20x30x40', '--margin', '-1'], /margin “-1”/],
    ['a seed with a point', ['--envelope', '1x1x1', '--seed', '1.5'], /seed “1.5”/],
    ['a huge seed', ['--envelope', '1x1x1', '--seed', '4294967296'], /seed/],
    ['a unit of 0', ['--envelope', '1x1x1', '--unit', '0'], /unit “0”/],
    ['an unknown option', ['--envelope', '1x1x1', '--fast'], /“--fast” is not known/],
    ['an option without value', ['--envelope'], /--envelope needs a value/],
    ['an option twice', ['--seed', '1', '--seed', '2'], /--seed is given twice/],
    ['two files', ['other.stl', '--envelope', '1x1x1'], /“other.stl” is one file too many/],
  ] as [string, string[], RegExp][])(
    'refuses %s in one sentence that names the file',
    (_, words, expected) => {
      const message = complaint('plan', 'cube.stl', ...words);
      expect(message).toMatch(expected);
      expect(message).toContain('cube.stl');
      expect(message).toMatch(/[.)]$/);
      expect(message.split('\n')).toHaveLength(1);
    },
  );

  it('says what is missing when there is no command or no file', () => {
    expect(complaint()).toMatch(/Say what to do/);
    expect(complaint('print', 'x.stl')).toMatch(/“print” is not a command/);
    expect(complaint('plan')).toMatch(/Name the file to plan/);
  });
});
