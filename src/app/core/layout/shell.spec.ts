import { signal } from '@angular/core';
import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { MatMenuHarness } from '@angular/material/menu/testing';
import { provideRouter } from '@angular/router';
import { SessionStore } from '../auth/session-store';
import { Shell } from './shell';
import { ThemeStore } from './theme-store';

// The first test compiles the templates, which takes its time on a busy machine.
vi.setConfig({ testTimeout: 30_000 });

async function setUp() {
  localStorage.clear();
  const signOut = vi.fn(() => Promise.resolve());
  const session = {
    user: { name: 'Ada Larch', email: 'ada@demo.invalid' },
    workshop: { name: 'Lantern Lane Props', isDemo: true },
    role: 'designer',
  };
  TestBed.configureTestingModule({
    providers: [
      provideRouter([]),
      {
        provide: SessionStore,
        useValue: { session: signal(session), roleName: signal('Designer'), signOut },
      },
    ],
  });
  const fixture = TestBed.createComponent(Shell);
  await fixture.whenStable();
  const host = fixture.nativeElement as HTMLElement;
  document.body.append(host);
  const loader = TestbedHarnessEnvironment.loader(fixture);
  const person = await loader.getHarness(MatMenuHarness.with({ selector: '.person' }));
  return { fixture, host, person, signOut };
}

describe('Shell', () => {
  it('names the workshop, marks the demo one, and leads to every place', async () => {
    const { fixture, host } = await setUp();
    expect(host.querySelector('.workshop')?.textContent).toMatch(/Lantern Lane Props\s*Demo/);
    const places = [...host.querySelectorAll('nav a')].map((link) => link.getAttribute('href'));
    expect(places).toEqual(['/models', '/envelopes', '/materials']);
    fixture.destroy();
  });

  it('skips to the main region without changing the address', async () => {
    const { fixture, host } = await setUp();
    const skip = host.querySelector<HTMLAnchorElement>('a.skip');
    const before = location.href;
    skip?.click();
    expect(document.activeElement?.id).toBe('main');
    expect(location.href).toBe(before);
    fixture.destroy();
  });

  it('chooses the theme from the menu and tells which is chosen', async () => {
    const { fixture, person } = await setUp();
    await person.open();
    await person.clickItem({ text: /Dark/ });
    expect(TestBed.inject(ThemeStore).choice()).toBe('dark');
    await person.open();
    const [dark] = await person.getItems({ text: /Dark/ });
    const host = await dark?.host();
    expect(await host?.getAttribute('role')).toBe('menuitemradio');
    expect(await host?.getAttribute('aria-checked')).toBe('true');
    fixture.destroy();
    document.documentElement.style.colorScheme = '';
  });

  it('signs out from the menu', async () => {
    const { fixture, person, signOut } = await setUp();
    await person.open();
    await person.clickItem({ text: /Sign out/ });
    expect(signOut).toHaveBeenCalledTimes(1);
    fixture.destroy();
  });
});
