import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { MatButtonHarness } from '@angular/material/button/testing';
import { MatInputHarness } from '@angular/material/input/testing';
import { provideRouter, Router } from '@angular/router';
import { type MaterialResponse } from '../../../shared/api/materials.contract.js';
import { type Action, may, type Role } from '../../../shared/api/roles.js';
import { usualMaterial } from '../../../shared/jobs/material-profile.js';
import { SessionStore } from '../core/auth/session-store';
import { MaterialEditor } from './material-editor/material-editor';
import { MaterialList } from './material-list/material-list';
import { MaterialsApi } from './materials-api';

// The first test compiles the templates, which takes its time on a busy machine.
vi.setConfig({ testTimeout: 30_000 });

const material: MaterialResponse = {
  id: 'm'.repeat(20),
  profile: { ...usualMaterial, name: 'PLA, blue' },
  version: 3,
  updatedAt: '2031-03-04T12:00:00.000Z',
};

async function setUp(
  component: typeof MaterialList | typeof MaterialEditor,
  role: Role,
  inputs: Record<string, unknown> = {},
) {
  const api = {
    list: vi.fn(() => Promise.resolve([material])),
    get: vi.fn(() => Promise.resolve(material)),
    create: vi.fn(() => Promise.resolve(material)),
    replace: vi.fn(() => Promise.resolve(material)),
    remove: vi.fn(() => Promise.resolve()),
  };
  TestBed.configureTestingModule({
    providers: [
      provideRouter([{ path: '**', children: [] }]),
      { provide: MaterialsApi, useValue: api },
      { provide: SessionStore, useValue: { can: (action: Action) => may(role, action) } },
    ],
  });
  const fixture = TestBed.createComponent<MaterialList | MaterialEditor>(component);
  for (const [name, value] of Object.entries(inputs)) fixture.componentRef.setInput(name, value);
  await fixture.whenStable();
  await fixture.whenStable();
  const loader = TestbedHarnessEnvironment.loader(fixture);
  const text = () => (fixture.nativeElement as HTMLElement).textContent!.replace(/\s+/g, ' ');
  return { api, loader, text };
}

const inputNamed = async (
  loader: Awaited<ReturnType<typeof setUp>>['loader'],
  label: string,
): Promise<MatInputHarness> => loader.getHarness(MatInputHarness.with({ label }));

describe('MaterialList', () => {
  it('shows each material with its numbers, and lets only those change it who may', async () => {
    const { text } = await setUp(MaterialList, 'maker');
    expect(text()).toContain('PLA, blue');
    expect(text()).toContain('1.24 g/cm³');
    expect(text()).toContain('0.15');
    expect(text()).not.toContain('New material');
    expect(text()).toContain('Shop leads and owners change them');
  });
});

describe('MaterialEditor', () => {
  it('writes a change over the version that it read, and no other', async () => {
    const { api, loader } = await setUp(MaterialEditor, 'shopLead', { materialId: material.id });
    await (await inputNamed(loader, 'Locating')).setValue('0.2');
    await (await loader.getHarness(MatButtonHarness.with({ text: 'Save' }))).click();
    expect(api.replace).toHaveBeenCalledExactlyOnceWith(material.id, {
      version: 3,
      profile: {
        ...material.profile,
        clearances: { ...material.profile.clearances, locatingMm: 0.2 },
      },
    });
    await vi.waitFor(() => expect(TestBed.inject(Router).url).toBe('/materials'));
  });

  it('does not save a number out of range and says so', async () => {
    const { api, loader, text } = await setUp(MaterialEditor, 'owner');
    await (await inputNamed(loader, 'Density')).setValue('40');
    await (await loader.getHarness(MatButtonHarness.with({ text: 'Save' }))).click();
    expect(api.create).not.toHaveBeenCalled();
    expect(text()).toContain('Some fields need another look');
  });

  it('is for reading only to those who may not change it', async () => {
    const { loader, text } = await setUp(MaterialEditor, 'designer', { materialId: material.id });
    expect(await (await inputNamed(loader, 'Density')).isReadonly()).toBe(true);
    expect(text()).not.toContain('Save');
  });
});
