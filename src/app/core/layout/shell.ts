import { ChangeDetectionStrategy, Component, inject } from '@angular/core';
import { MatButton, MatIconButton } from '@angular/material/button';
import { MatDivider } from '@angular/material/divider';
import { MatIcon } from '@angular/material/icon';
import { MatMenu, MatMenuItem, MatMenuTrigger } from '@angular/material/menu';
import { RouterLink, RouterLinkActive, RouterOutlet } from '@angular/router';
import { Mark } from '../../ui/mark/mark';
import { SessionStore } from '../auth/session-store';
import { ThemeStore, type ThemeChoice } from './theme-store';

/** The frame of every page behind the door: toolbar, navigation, the person's own menu. */
@Component({
  selector: 'sw-shell',
  imports: [
    Mark,
    MatButton,
    MatDivider,
    MatIcon,
    MatIconButton,
    MatMenu,
    MatMenuItem,
    MatMenuTrigger,
    RouterLink,
    RouterLinkActive,
    RouterOutlet,
  ],
  templateUrl: './shell.html',
  styleUrl: './shell.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Shell {
  private readonly sessions = inject(SessionStore);
  private readonly theme = inject(ThemeStore);

  protected readonly session = this.sessions.session;
  protected readonly roleName = this.sessions.roleName;
  protected readonly themeChoice = this.theme.choice;
  protected readonly places = [
    { path: '/models', name: 'Models', icon: 'deployed_code' },
    { path: '/envelopes', name: 'Envelopes', icon: 'select_all' },
    { path: '/materials', name: 'Materials', icon: 'inventory_2' },
  ];
  protected readonly themes: readonly { choice: ThemeChoice; name: string; icon: string }[] = [
    { choice: 'system', name: 'As the system', icon: 'contrast' },
    { choice: 'light', name: 'Light', icon: 'light_mode' },
    { choice: 'dark', name: 'Dark', icon: 'dark_mode' },
  ];

  protected skipToMain(main: HTMLElement, event: Event): void {
    // The base address would turn a plain #main link into a visit of the start page.
    event.preventDefault();
    main.focus();
  }

  protected chooseTheme(choice: ThemeChoice): void {
    this.theme.choose(choice);
  }

  protected async signOut(): Promise<void> {
    await this.sessions.signOut();
  }
}
