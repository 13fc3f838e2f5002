import type { Solid } from './solids/binary-stl.js';
import { type Station, sweptTubeSolid } from './solids/swept-tube.js';
import { type Point, thickSheetSolid } from './solids/thick-sheet.js';

/** A model of the demo workshop, made by code. */
export interface DemoModel {
  readonly name: string;
  readonly fileName: string;
  readonly make: () => Solid;
}

/** Props for an invented play by the sea. All larger than a common printer's bed. */
export const demoModels: readonly DemoModel[] = [
  { name: 'Harbour bell cowl', fileName: 'harbour-bell-cowl.stl', make: makeBellCowl },
  { name: 'Moon disc', fileName: 'moon-disc.stl', make: makeMoonDisc },
  { name: 'Heron', fileName: 'heron.stl', make: makeHeron },
  { name: 'Ventilator elbow', fileName: 'ventilator-elbow.stl', make: makeVentilatorElbow },
];

const round = (radius: number, column: number, columns: number, z: number): Point => {
  const angle = (2 * Math.PI * column) / columns;
  return [radius * Math.cos(angle), radius * Math.sin(angle), z];
};

/** A bell 560 mm wide and 620 mm high with a 3 mm wall, a hole on top and six windows. */
export function makeBellCowl(): Solid {
  const [rows, columns, wallMm, heightMm] = [96, 144, 3, 620];
  const [topRadius, rimRadius, waistRadius] = [40, 280, 175];
  // Waist like a bell: steep in the middle, flaring at the rim, drawn in over the crown.
  const radiusAt = (share: number) =>
    share < 0.25
      ? rimRadius - (rimRadius - waistRadius) * Math.sin((share / 0.25) * (Math.PI / 2))
      : topRadius +
        (waistRadius - topRadius) * Math.sqrt(Math.max(0, 1 - ((share - 0.25) / 0.75) ** 4));
  const profile = (row: number): readonly [number, number] => [
    radiusAt(row / rows),
    (heightMm * row) / rows,
  ];
  const inward = (row: number): readonly [number, number] => {
    const [before, after] = [profile(Math.max(0, row - 1)), profile(Math.min(rows, row + 1))];
    const [dr, dz] = [after[0] - before[0], after[1] - before[1]];
    const length = Math.hypot(dr, dz);
    return [(-dz * wallMm) / length, (dr * wallMm) / length];
  };
  return thickSheetSolid({
    rows,
    columns,
    outer: (row, column) => {
      const [radius, z] = profile(row);
      return round(radius, column, columns, z);
    },
    inner: (row, column) => {
      const [[radius, z], [dr, dz]] = [profile(row), inward(row)];
      // Both ends stay flat, so that the cowl stands.
      const isEnd = row === 0 || row === rows;
      return round(isEnd ? radius - wallMm : radius + dr, column, columns, isEnd ? z : z + dz);
    },
    isOpen: (row, column) => row >= 40 && row < 66 && column % 24 >= 7 && column % 24 < 17,
  });
}

/** A disc of 600 mm with craters in relief and a hole of 8 mm to hang it from. */
export function makeMoonDisc(): Solid {
  const [rows, columns, radiusMm, holeMm] = [90, 240, 300, 4];
  const random = seededRandom(1887);
  const craters = Array.from({ length: 42 }, () => {
    const [distance, angle] = [270 * Math.sqrt(random()), 2 * Math.PI * random()];
    const radius = 9 + 46 * random() ** 3;
    return { x: distance * Math.cos(angle), y: distance * Math.sin(angle), radius };
  });
  const reliefMm = (x: number, y: number) => {
    const dome = 26 * Math.sqrt(Math.max(0, 1 - (x * x + y * y) / (radiusMm * radiusMm)));
    const swell = 2.5 * Math.sin(x / 37) * Math.cos(y / 43);
    return craters.reduce((z, crater) => {
      const share = Math.hypot(x - crater.x, y - crater.y) / crater.radius;
      const depth = crater.radius * 0.16;
      const bowl = share < 1 ? depth * (share * share - 1) : 0;
      const ridge = depth * 0.45 * Math.exp(-(((share - 1) / 0.22) ** 2));
      return Math.max(-8, z + bowl + ridge);
    }, dome + swell);
  };
  const radiusAt = (row: number) => holeMm + ((radiusMm - holeMm) * row) / rows;
  return thickSheetSolid({
    rows,
    columns,
    outer: (row, column) => round(radiusAt(row), column, columns, 0),
    inner: (row, column) => {
      const [x, y] = round(radiusAt(row), column, columns, 0);
      return [x, y, 16 + reliefMm(x, y)];
    },
  });
}

/** A standing bird, 1.68 m tall, as one tube of changing thickness: foot, leg, body, neck, beak. */
export function makeHeron(): Solid {
  const stations: readonly Station[] = [
    { at: [0, 0, 0], radius: 150 },
    { at: [0, 0, 14], radius: 148 },
    { at: [0, 0, 40], radius: 60 },
    { at: [0, 0, 90], radius: 26 },
    { at: [0, 0, 260], radius: 21 },
    { at: [0, 0, 430], radius: 27 },
    { at: [4, 0, 600], radius: 26 },
    { at: [14, 0, 730], radius: 62 },
    { at: [50, 0, 850], radius: 118 },
    { at: [116, 0, 965], radius: 124 },
    { at: [196, 0, 1070], radius: 84 },
    { at: [262, 0, 1170], radius: 50 },
    { at: [282, 0, 1280], radius: 40 },
    { at: [246, 0, 1385], radius: 35 },
    { at: [212, 0, 1490], radius: 34 },
    { at: [236, 0, 1590], radius: 40 },
    { at: [312, 0, 1632], radius: 48 },
    { at: [392, 0, 1626], radius: 34 },
    { at: [450, 0, 1612], radius: 19 },
    { at: [560, 0, 1584], radius: 12 },
    { at: [690, 0, 1552], radius: 3 },
  ];
  return sweptTubeSolid({ stations, ringsPerSpan: 12, sides: 64 });
}

/** A pipe bend of 300 mm bore with a 4 mm wall and a flange at both ends. */
export function makeVentilatorElbow(): Solid {
  const [columns, bendMm, boreMm, wallMm, straightMm] = [120, 330, 150, 4, 140];
  const [flangeMm, flangeRows] = [26, 2];
  const straightRows = 14;
  const bendRows = 72;
  const rows = 2 * straightRows + bendRows;
  // Centre line: up, a quarter circle towards +x, then along +x.
  const frameAt = (row: number): { at: Point; out: Point } => {
    if (row <= straightRows)
      return { at: [0, 0, straightMm * (row / straightRows - 1)], out: [1, 0, 0] };
    const past = row - straightRows - bendRows;
    const turn = (Math.PI / 2) * Math.min(1, (row - straightRows) / bendRows);
    const along = past > 0 ? (straightMm * past) / straightRows : 0;
    return {
      at: [bendMm * (1 - Math.cos(turn)) + along, 0, bendMm * Math.sin(turn)],
      out: [Math.cos(turn), 0, -Math.sin(turn)],
    };
  };
  const ring = (row: number, column: number, radius: number): Point => {
    const { at, out } = frameAt(row);
    const [c, y] = round(radius, column, columns, 0);
    return [at[0] + c * out[0], at[1] + y, at[2] + c * out[2]];
  };
  const isFlange = (row: number) => row <= flangeRows || row >= rows - flangeRows;
  return thickSheetSolid({
    rows,
    columns,
    outer: (row, column) => ring(row, column, boreMm + wallMm + (isFlange(row) ? flangeMm : 0)),
    inner: (row, column) => ring(row, column, boreMm),
  });
}

/** Mulberry32 by Tommy Ettinger (public domain, from memory): the same numbers everywhere. */
function seededRandom(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 2 ** 32;
  };
}
