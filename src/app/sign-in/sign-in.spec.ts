import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { MatButtonHarness } from '@angular/material/button/testing';
import { MatFormFieldHarness } from '@angular/material/form-field/testing';
import { MatInputHarness } from '@angular/material/input/testing';
import { Router, provideRouter } from '@angular/router';
import { SessionApi } from '../core/auth/session-api';
import { SessionStore } from '../core/auth/session-store';
import { ApiFailure } from '../core/http/api-failure';
import { SignIn } from './sign-in';

// The first test compiles the templates, which takes its time on a busy machine.
vi.setConfig({ testTimeout: 30_000 });

const accounts = [
  { email: 'ada@demo.invalid', password: 'demo', role: 'designer', name: 'Ada Larch' },
];

async function setUp(signIn: () => Promise<void> = () => Promise.resolve(), next?: string) {
  const signInSpy = vi.fn(signIn);
  TestBed.configureTestingModule({
    providers: [
      provideRouter([{ path: '**', children: [] }]),
      { provide: SessionStore, useValue: { signIn: signInSpy } },
      { provide: SessionApi, useValue: { demoAccounts: () => Promise.resolve({ accounts }) } },
    ],
  });
  const fixture = TestBed.createComponent(SignIn);
  fixture.componentRef.setInput('next', next);
  await fixture.whenStable();
  const loader = TestbedHarnessEnvironment.loader(fixture);
  const press = async (text: string | RegExp) =>
    (await loader.getHarness(MatButtonHarness.with({ text }))).click();
  const fill = async (label: string, value: string) => {
    const field = await loader.getHarness(MatFormFieldHarness.with({ floatingLabelText: label }));
    await (await field.getControl(MatInputHarness))?.setValue(value);
  };
  const host = fixture.nativeElement as HTMLElement;
  return { press, fill, host, loader, signIn: signInSpy, router: TestBed.inject(Router) };
}

describe('SignIn', () => {
  it('signs in and goes to the models', async () => {
    const { press, fill, signIn, router } = await setUp();
    await fill('E-mail', 'ada@demo.invalid');
    await fill('Password', 'demo');
    await press('Sign in');
    expect(signIn).toHaveBeenCalledWith({ email: 'ada@demo.invalid', password: 'demo' });
    await vi.waitFor(() => expect(router.url).toBe('/models'));
  });

  it('says at the fields what is missing and sends nothing', async () => {
    const { press, loader, signIn } = await setUp();
    await press('Sign in');
    const fields = await loader.getAllHarnesses(MatFormFieldHarness);
    const errors = await Promise.all(fields.map((field) => field.getTextErrors()));
    expect(errors).toEqual([['Enter the e-mail address of your account'], ['Enter your password']]);
    expect(signIn).not.toHaveBeenCalled();
  });

  it('shows a refusal in words and stays', async () => {
    const sentence = 'E-mail and password do not belong together.';
    const refusal = new ApiFailure('session.wrongCredentials', sentence, 401);
    const { press, host, router } = await setUp(() => Promise.reject(refusal));
    await press('Sign in as Ada Larch');
    expect(host.textContent).toContain(sentence);
    expect(router.url).toBe('/');
  });

  it('signs a demo person in with one click, marked as demo and with the role', async () => {
    const { press, host, signIn } = await setUp();
    expect(host.querySelector('.demo')?.textContent).toMatch(/Demo accounts[\s\S]*Designer/);
    await press('Sign in as Ada Larch');
    expect(signIn).toHaveBeenCalledWith({ email: 'ada@demo.invalid', password: 'demo' });
  });

  it.each([
    ['/plans/abc?piece=2', '/plans/abc?piece=2'],
    ['//elsewhere.invalid/x', '/models'],
    ['/\\elsewhere.invalid', '/models'],
    ['https://elsewhere.invalid', '/models'],
  ])('goes on to %s only inside this app', async (next, place) => {
    const { press, router } = await setUp(undefined, next);
    await press('Sign in as Ada Larch');
    await vi.waitFor(() => expect(router.url).toBe(place));
  });
});
