import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { ChangeDetectionStrategy, Component, signal } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { PartsListHarness } from '../testing/parts-list-harness';
import { samplePiece } from '../testing/sample-plan';
import { PartsList } from './parts-list';

@Component({
  imports: [PartsList],
  template: `
    <sw-parts-list
      [pieces]="pieces"
      [selected]="selected()"
      (pieceSelected)="selected.set($event)"
    />
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
class Page {
  readonly pieces = [samplePiece(1), samplePiece(2), samplePiece(3, { fits: false })];
  readonly selected = signal<string | null>(null);
}

async function setUp() {
  const fixture = TestBed.createComponent(Page);
  const list = await TestbedHarnessEnvironment.loader(fixture).getHarness(PartsListHarness);
  return { page: fixture.componentInstance, list };
}

describe('PartsList', () => {
  it('says item, name, size, volume, support and fit of every piece', async () => {
    const { list } = await setUp();
    const texts = await list.texts();
    expect(texts).toHaveLength(3);
    expect(texts[0]).toMatch(/1\s*P01.*101\.0 × 200\.0 × 50\.0\smm.*1\s000\scm³.*2.0\scm³.*yes/s);
    expect(texts[2]).toMatch(/P03.*no/s);
  });

  it('chooses a piece by its row and lets go of it by the same row', async () => {
    const { page, list } = await setUp();
    await list.choose('P02');
    expect(page.selected()).toBe('P02');
    expect(await list.chosen()).toEqual(['P02']);
    await list.choose('P02');
    expect(page.selected()).toBeNull();
  });

  it('has one row in the tab order: the first, then the chosen one', async () => {
    const { page, list } = await setUp();
    expect(await list.inTabOrder()).toEqual(['P01']);
    page.selected.set('P03');
    expect(await list.inTabOrder()).toEqual(['P03']);
  });

  it('goes through the rows by arrow keys, Home and End, and stops at the ends', async () => {
    const { page, list } = await setUp();
    await list.press('P01', 'down');
    expect(page.selected()).toBe('P02');
    expect(await list.focused()).toBe('P02');
    await list.press('P02', 'end');
    expect(page.selected()).toBe('P03');
    await list.press('P03', 'down');
    expect(page.selected()).toBe('P03');
    await list.press('P03', 'home');
    await list.press('P01', 'up');
    expect(await list.focused()).toBe('P01');
  });
});
