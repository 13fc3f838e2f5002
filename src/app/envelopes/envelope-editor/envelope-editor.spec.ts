import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { MatButtonHarness } from '@angular/material/button/testing';
import { MatFormFieldHarness } from '@angular/material/form-field/testing';
import { MatInputHarness } from '@angular/material/input/testing';
import { MatRadioButtonHarness } from '@angular/material/radio/testing';
import { Router, provideRouter } from '@angular/router';
import { SessionStore } from '../../core/auth/session-store';
import { ApiFailure } from '../../core/http/api-failure';
import { EnvelopesApi } from '../envelopes-api';
import { EnvelopesStore } from '../envelopes-store';
import { makeRound } from '../testing/envelope-fixtures';
import { EnvelopeEditor } from './envelope-editor';

// The first test compiles the templates, which takes its time on a busy machine.
vi.setConfig({ testTimeout: 30_000 });

async function setUp(setting: {
  envelopeId?: string;
  mayWrite?: boolean;
  create?: () => Promise<void>;
}) {
  const create = vi.fn(setting.create ?? (() => Promise.resolve()));
  const replace = vi.fn(() => Promise.resolve());
  TestBed.configureTestingModule({
    providers: [
      provideRouter([{ path: 'envelopes', children: [] }]),
      { provide: SessionStore, useValue: { can: () => setting.mayWrite ?? true } },
      { provide: EnvelopesApi, useValue: { get: () => Promise.resolve(makeRound()) } },
      { provide: EnvelopesStore, useValue: { create, replace } },
    ],
  });
  const fixture = TestBed.createComponent(EnvelopeEditor);
  fixture.componentRef.setInput('envelopeId', setting.envelopeId);
  await fixture.whenStable();
  const loader = TestbedHarnessEnvironment.loader(fixture);
  const field = (floatingLabelText: string) =>
    loader.getHarness(MatFormFieldHarness.with({ floatingLabelText }));
  const type = async (label: string, value: string) =>
    (await (await field(label)).getControl(MatInputHarness))?.setValue(value);
  const save = async () => (await loader.getHarness(MatButtonHarness)).click();
  const host = fixture.nativeElement as HTMLElement;
  return { loader, field, type, save, create, replace, host, router: TestBed.inject(Router) };
}

describe('EnvelopeEditor', () => {
  it('saves a new envelope and goes back to the list', async () => {
    const { type, save, create, router } = await setUp({});
    await type('Name', 'Bench');
    await type('Width', '300');
    await save();
    expect(create).toHaveBeenCalledWith({
      name: 'Bench',
      shape: 'rectangular',
      widthMm: 300,
      depthMm: 220,
      heightMm: 250,
      marginMm: 2,
      nozzleMm: 0.4,
      layerHeightMm: 0.2,
    });
    await vi.waitFor(() => expect(router.url).toBe('/envelopes'));
  });

  it('says at the field what is wrong and sends nothing', async () => {
    const { type, save, field, create } = await setUp({});
    await type('Height', '-1');
    await save();
    expect(await (await field('Name')).getTextErrors()).toEqual(['Give the envelope a name']);
    expect(await (await field('Height')).getTextErrors()).toEqual([
      'More than 0, at most 10\u00a0000\u00a0mm',
    ]);
    expect(create).not.toHaveBeenCalled();
  });

  it('asks for a diameter when the bed is round', async () => {
    const { loader, field } = await setUp({});
    await (await loader.getHarness(MatRadioButtonHarness.with({ label: 'Round' }))).check();
    expect(await field('Diameter')).toBeTruthy();
    await expect(field('Width')).rejects.toThrow();
  });

  it("shows the server's remark at its field", async () => {
    const details = [{ path: 'name', message: 'This name is taken' }];
    const refusal = new ApiFailure('envelope.nameTaken', 'Taken.', 409, details);
    const { type, save, field } = await setUp({ create: () => Promise.reject(refusal) });
    await type('Name', 'Bench');
    await save();
    expect(await (await field('Name')).getTextErrors()).toEqual(['This name is taken']);
  });

  it('changes a stored envelope', async () => {
    const { type, save, replace } = await setUp({ envelopeId: 'e'.repeat(20) });
    await type('Diameter', '240');
    await save();
    expect(replace).toHaveBeenCalledWith(
      'e'.repeat(20),
      expect.objectContaining({ shape: 'round', diameterMm: 240, name: 'Tall' }),
    );
  });

  it('shows readers the measures and a sentence why they cannot change them', async () => {
    const { host, loader } = await setUp({ envelopeId: 'e'.repeat(20), mayWrite: false });
    const text = host.textContent.replace(/[\s\u00a0]+/g, ' ');
    expect(text).toContain('Shop leads and owners change it');
    expect(text).toContain('Usable bed⌀ 196 mm');
    expect(await loader.getAllHarnesses(MatInputHarness)).toHaveLength(0);
  });
});
