import { ChangeDetectionStrategy, Component, inject, input, signal } from '@angular/core';
import { NonNullableFormBuilder, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { MatError, MatFormField, MatLabel } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { Router } from '@angular/router';
import { roleNames } from '../../../shared/api/roles.js';
import { type DemoAccountsResponse } from '../../../shared/api/session.contract.js';
import { SessionApi } from '../core/auth/session-api';
import { SessionStore } from '../core/auth/session-store';
import { sentenceFor } from '../core/http/api-failure';
import { Mark } from '../ui/mark/mark';
import { Notice } from '../ui/notice/notice';

type DemoAccount = DemoAccountsResponse['accounts'][number];

/** The door: e-mail and password, or one of the demo people. */
@Component({
  selector: 'sw-sign-in',
  imports: [
    Mark,
    MatButton,
    MatError,
    MatFormField,
    MatInput,
    MatLabel,
    Notice,
    ReactiveFormsModule,
  ],
  templateUrl: './sign-in.html',
  styleUrl: './sign-in.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class SignIn {
  private readonly sessions = inject(SessionStore);
  private readonly api = inject(SessionApi);
  private readonly router = inject(Router);

  /** Where the person wanted to go before the door closed (query). */
  readonly next = input<string>();
  /** Set when a running session came to its end (query). */
  readonly ended = input<string>();

  protected readonly form = inject(NonNullableFormBuilder).group({
    email: ['', [Validators.required, Validators.minLength(3), Validators.maxLength(254)]],
    password: ['', [Validators.required, Validators.maxLength(200)]],
  });
  protected readonly isBusy = signal(false);
  protected readonly problem = signal('');
  protected readonly demoAccounts = signal<readonly DemoAccount[]>([]);
  protected readonly roleNames = roleNames;

  constructor() {
    void this.loadDemoAccounts();
  }

  protected async signIn(): Promise<void> {
    if (this.isBusy()) return;
    this.problem.set('');
    if (this.form.invalid) {
      this.form.markAllAsTouched();
      return;
    }
    this.isBusy.set(true);
    try {
      await this.sessions.signIn(this.form.getRawValue());
      await this.router.navigateByUrl(this.placeToGo());
    } catch (failure) {
      // Expected: wrong words, too many tries, no server. Each comes with its own sentence.
      this.problem.set(sentenceFor(failure));
    } finally {
      this.isBusy.set(false);
    }
  }

  protected async signInAs(account: DemoAccount): Promise<void> {
    this.form.setValue({ email: account.email, password: account.password });
    await this.signIn();
  }

  /** Only addresses inside this app: a link must not send a person elsewhere after signing in. */
  private placeToGo(): string {
    const next = this.next();
    return next && /^\/(?![/\\])/.test(next) ? next : '/models';
  }

  private async loadDemoAccounts(): Promise<void> {
    try {
      this.demoAccounts.set((await this.api.demoAccounts()).accounts);
    } catch {
      // Expected without a server: the list is a convenience, the form says what is wrong.
    }
  }
}
