import { describe, expect, it } from 'vitest';
import { type Piece } from '../../shared/jobs/plan-make.js';
import { csvField, cutListCsv } from './cut-list.js';

const piece = (item: number): Piece => ({
  item,
  name: `P0${item}`,
  triangles: 12,
  volumeMm3: 1000.5,
  sizeMm: [10, 20.25, 5.0026],
  fits: item === 1,
  space: 0,
  supportMm3: 0,
  file: `pieces/P0${item}.stl`,
  placement: [1, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1, 0],
  centreMm: [0, 0, 0],
  orientations: [],
  estimate: null,
  notes: [],
  openings: 0,
});

describe('cutListCsv', () => {
  it('gives one header with units and one CRLF line a piece, with what it meets', () => {
    const csv = cutListCsv(
      'bell',
      [piece(1), piece(2)],
      [
        {
          between: ['P01', 'P02'],
          areaMm2: 3,
          cut: 1,
          visibleMm: 0,
          bendingKpa: 0,
          joint: null,
          glueMl: [0, 0],
        },
      ],
    );
    expect(csv.split('\r\n')).toEqual([
      'item,piece,model,width_mm,depth_mm,height_mm,volume_mm3,triangles,fits,meets,file,notes',
      '1,P01,bell,10.000,20.250,5.003,1000.500,12,yes,P02,pieces/P01.stl,',
      '2,P02,bell,10.000,20.250,5.003,1000.500,12,no,P01,pieces/P02.stl,',
      '',
    ]);
  });

  it('quotes commas, quotes and line ends as RFC 4180 says', () => {
    expect(csvField('a,b')).toBe('"a,b"');
    expect(csvField('say "so"')).toBe('"say ""so"""');
    expect(csvField('two\r\nlines')).toBe('"two\r\nlines"');
    expect(csvField('plain')).toBe('plain');
  });

  it.each(['=1+1', '+1', '-1', '@SUM(A1)', '\t=1', '=HYPERLINK("x,y")'])(
    'never lets a spreadsheet run the field %j',
    (text) => {
      expect(csvField(text)).toMatch(/^"?'/);
    },
  );
});
