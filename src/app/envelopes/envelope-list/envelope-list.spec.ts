import { signal } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { provideRouter } from '@angular/router';
import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { MatButtonHarness } from '@angular/material/button/testing';
import { type EnvelopeResponse } from '../../../../shared/api/envelopes.contract.js';
import { SessionStore } from '../../core/auth/session-store';
import { Confirmations } from '../../ui/confirm-dialog/confirmations';
import { EnvelopesStore } from '../envelopes-store';
import { makeRectangular, makeRound } from '../testing/envelope-fixtures';
import { EnvelopeList } from './envelope-list';

// The first test compiles the templates, which takes its time on a busy machine.
vi.setConfig({ testTimeout: 30_000 });

async function setUp(setting: {
  mayWrite: boolean;
  envelopes: readonly EnvelopeResponse[];
  isSure?: boolean;
}) {
  const remove = vi.fn(() => Promise.resolve());
  TestBed.configureTestingModule({
    providers: [
      provideRouter([]),
      { provide: SessionStore, useValue: { can: () => setting.mayWrite } },
      {
        provide: Confirmations,
        useValue: { ask: () => Promise.resolve(setting.isSure ?? true) },
      },
      {
        provide: EnvelopesStore,
        useValue: {
          envelopes: signal(setting.envelopes),
          isEmpty: signal(setting.envelopes.length === 0),
          problem: signal(''),
          load: () => Promise.resolve(),
          remove,
        },
      },
    ],
  });
  const fixture = TestBed.createComponent(EnvelopeList);
  await fixture.whenStable();
  const host = fixture.nativeElement as HTMLElement;
  const text = () => host.textContent.replace(/[\s\u00a0]+/g, ' ');
  return { host, text, remove, loader: TestbedHarnessEnvironment.loader(fixture) };
}

const both = [makeRectangular(), makeRound({ id: 't'.repeat(20) })];

describe('EnvelopeList', () => {
  it('shows every measure with its unit, and the bed inside the margin', async () => {
    const { host } = await setUp({ mayWrite: true, envelopes: both });
    const cells = [...host.querySelectorAll('tbody tr:first-child td')].map((cell) =>
      cell.textContent.replace(/[\s\u00a0]+/g, ' ').trim(),
    );
    expect(cells.slice(0, 6)).toEqual([
      '220 × 210 mm',
      '2 mm',
      '216 × 206 mm',
      '250 mm',
      '0.4 mm',
      '0.2 mm',
    ]);
  });

  it('tells readers why they cannot change anything, and offers them nothing to change', async () => {
    const { text, loader, host } = await setUp({ mayWrite: false, envelopes: both });
    expect(text()).toContain('Shop leads and owners change them');
    expect(await loader.getAllHarnesses(MatButtonHarness)).toHaveLength(0);
    expect(host.querySelector('a[href="/envelopes/new"]')).toBeNull();
  });

  it.each([true, false])('removes only when the person is sure (%s)', async (isSure) => {
    const { loader, remove } = await setUp({ mayWrite: true, envelopes: both, isSure });
    await (
      await loader.getHarness(MatButtonHarness.with({ selector: '[aria-label="Remove Tall"]' }))
    ).click();
    expect(remove.mock.calls).toEqual(isSure ? [['t'.repeat(20)]] : []);
  });

  it('says what to do next when there is none', async () => {
    const { text } = await setUp({ mayWrite: true, envelopes: [] });
    expect(text()).toContain('No envelope yet');
    expect(text()).toContain('New envelope');
  });
});
