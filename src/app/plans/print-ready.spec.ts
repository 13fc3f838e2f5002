import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { type Type } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { MatButtonHarness } from '@angular/material/button/testing';
import { MatRadioButtonHarness } from '@angular/material/radio/testing';
import { MatSelectHarness } from '@angular/material/select/testing';
import { type Joint, usualJoints } from '../../../shared/jobs/joint-plan.js';
import { type PieceOrientation, type Seam } from '../../../shared/jobs/plan-make.js';
import { GlueUp } from './glue-up/glue-up';
import { JointForm } from './joint-form/joint-form';
import { JointsList } from './joints-list/joints-list';
import { writeDirection, writeMass, writeRange } from './joint-words';
import { PieceSheet } from './piece-sheet/piece-sheet';
import { samplePiece } from './testing/sample-plan';

// The first test compiles the templates, which takes its time on a busy machine.
vi.setConfig({ testTimeout: 30_000 });

const joint: Joint = {
  kind: 'loose-pin',
  reason: '2 printed pins Ø 6 mm, 12 mm into each side.',
  fasteners: [],
  notes: ['Mind the names.'],
};
const seam = (first: string, second: string, cut: number): Seam => ({
  between: [first, second],
  areaMm2: 5_000,
  cut,
  visibleMm: 0,
  bendingKpa: 0,
  joint,
  glueMl: [0.98, 1.5],
});
const orientation = (changes: Partial<PieceOrientation>): PieceOrientation => ({
  down: [0, 0, -1],
  space: 0,
  supportMm3: 0,
  supportMm2: 0,
  heightMm: 80,
  contactMm2: 2_500,
  tipping: 1.5,
  scarMm2: 0,
  ...changes,
});

async function show<C>(component: Type<C>, inputs: Record<string, unknown>) {
  const fixture = TestBed.createComponent(component);
  for (const [name, value] of Object.entries(inputs)) fixture.componentRef.setInput(name, value);
  await fixture.whenStable();
  const loader = TestbedHarnessEnvironment.loader(fixture);
  const text = () => (fixture.nativeElement as HTMLElement).textContent!.replace(/\s+/g, ' ');
  return { fixture, loader, text };
}

describe('ranges, masses and directions in words', () => {
  it('have no more digits than they deserve', () => {
    expect(writeRange([1.234, 1.567], 'ml')).toBe('1.2 to 1.6\u00a0ml');
    expect(writeRange([10.1, 10.3], 'm')).toBe('10\u00a0m');
    expect(writeMass([900, 1_240])).toBe('0.9 to 1.2\u00a0kg');
    expect(writeMass([234, 287])).toBe('230 to 290\u00a0g');
    expect(writeDirection([0, 0, -1])).toBe('down');
    expect(writeDirection([0.7071, 0, 0.7071])).toBe('to the right and up');
  });
});

describe('JointsList', () => {
  it('says how each seam is held and why, and leaves out seams of before there were joints', async () => {
    const old = { ...seam('P02', 'P03', 2), joint: null };
    const { text } = await show(JointsList, { seams: [seam('P01', 'P02', 1), old] });
    expect(text()).toContain('P01 and P02');
    expect(text()).toContain('Printed pins');
    expect(text()).toContain(joint.reason);
    expect(text()).toContain('Mind the names.');
    expect(text()).not.toContain('P02 and P03');
  });
});

describe('JointForm', () => {
  it('asks for another joint in one seam and keeps what was chosen for others', async () => {
    const joints = {
      ...usualJoints,
      seams: [{ between: ['P02', 'P03'], cut: 2, choice: { ...usualJoints.usual, most: 1 } }],
    };
    const seams = [seam('P01', 'P02', 1), seam('P02', 'P03', 2)];
    const { fixture, loader } = await show(JointForm, { seams, joints });
    const asked = vi.fn();
    fixture.componentInstance.asked.subscribe(asked);
    const [where, kind, diameter] = await loader.getAllHarnesses(MatSelectHarness);
    await where!.open();
    await where!.clickOptions({ text: 'P01 and P02' });
    await kind!.open();
    await kind!.clickOptions({ text: 'Fixed pins' });
    await diameter!.open();
    await diameter!.clickOptions({ text: '5 mm' });
    await (await loader.getHarness(MatButtonHarness)).click();
    expect(asked).toHaveBeenCalledExactlyOnceWith({
      ...joints,
      seams: [
        joints.seams[0],
        {
          between: ['P01', 'P02'],
          cut: 1,
          choice: { kind: 'fixed-pin', diameterMm: 5, depthMm: null, most: null },
        },
      ],
    });
  });
});

describe('PieceSheet', () => {
  it('gives estimates as ranges, and another way to lie when it is chosen', async () => {
    const other = orientation({ down: [1, 0, 0], supportMm3: 3_000, tipping: null });
    const piece = samplePiece(1, {
      orientations: [orientation({}), other],
      estimate: { massG: [90, 110], filamentM: [30, 37], hours: [2, 6], cost: [2, 2.4] },
      notes: ['No room for marks where it meets P02.'],
    });
    const { fixture, loader, text } = await show(PieceSheet, { piece, mayMake: true });
    const asked = vi.fn();
    fixture.componentInstance.asked.subscribe(asked);
    expect(text()).toContain('90 to 110 g');
    expect(text()).toContain('No room for marks where it meets P02.');
    const [first, second] = await loader.getAllHarnesses(MatRadioButtonHarness);
    expect(await first!.isChecked()).toBe(true);
    expect(await first!.getLabelText()).toMatch(/^As planned: .* stands firmly/);
    expect(await second!.getLabelText()).toContain('needs holding');
    await second!.check();
    await (await loader.getHarness(MatButtonHarness.with({ text: /lying so/ }))).click();
    expect(asked).toHaveBeenCalledExactlyOnceWith({ piece: 'P01', down: [1, 0, 0] });
  });
});

describe('GlueUp', () => {
  it('lists parts and steps with their glue, and warns where it should', async () => {
    const step = {
      moved: ['P02'],
      onto: ['P01', 'P03'],
      direction: [0, 0, -1],
      seams: [0, 1],
      glueMl: [6, 9],
      mixes: 3,
      movedMassG: [9_000, 12_000],
    };
    const parts = [
      ...[{ name: 'pin-6x24', kind: 'pin', count: 4, diameterMm: 6, lengthMm: 24, volumeMm3: 1 }],
      ...[{ name: 'rod-1x9', kind: 'rod', count: 2, diameterMm: 1, lengthMm: 9, volumeMm3: 1 }],
    ].map((part) => ({ ...part, file: part.kind === 'pin' ? 'pins/pin-6x24.stl' : null }));
    const { text } = await show(GlueUp, { steps: [step], parts, seams: [] });
    expect(text()).toContain('P02 onto P01 and P03, moving down (2 seams)');
    expect(text()).toContain('in 3 mixes');
    expect(text()).toContain('two people');
    expect(text()).toMatch(/epoxy sensitises the skin: wear gloves/);
    expect(text()).toContain('4 × pin-6x24: Ø 6 × 24 mm, in the ZIP');
    expect(text()).toContain('2 × rod-1x9: Ø 1 × 9 mm, cut from stock');
  });

  it('says nothing for a plan of before', async () => {
    const { text } = await show(GlueUp, { steps: [], parts: [], seams: [] });
    expect(text().trim()).toBe('');
  });
});
