import { DOCUMENT, Injectable, computed, effect, inject, signal } from '@angular/core';

export const themeChoices = ['system', 'light', 'dark'] as const;
export type ThemeChoice = (typeof themeChoices)[number];
const key = 'seamwright.theme';

/** Light or dark: the person's choice on this computer, or what the system says. */
@Injectable({ providedIn: 'root' })
export class ThemeStore {
  private readonly document = inject(DOCUMENT);
  private readonly systemDark = this.document.defaultView?.matchMedia?.(
    '(prefers-color-scheme: dark)',
  );
  private readonly _choice = signal<ThemeChoice>(storedChoice());
  private readonly systemIsDark = signal(this.systemDark?.matches ?? false);

  readonly choice = this._choice.asReadonly();
  /** What is on the screen now; canvases that draw their own ground need to know. */
  readonly isDark = computed(() =>
    this.choice() === 'system' ? this.systemIsDark() : this.choice() === 'dark',
  );

  constructor() {
    this.systemDark?.addEventListener('change', (event) => this.systemIsDark.set(event.matches));
    effect(() => {
      const choice = this.choice();
      this.document.documentElement.style.colorScheme = choice === 'system' ? '' : choice;
    });
  }

  choose(choice: ThemeChoice): void {
    this._choice.set(choice);
    try {
      localStorage.setItem(key, choice);
    } catch {
      // Expected where storage is switched off: the choice then lasts until the page is closed.
    }
  }
}

function storedChoice(): ThemeChoice {
  try {
    const stored = localStorage.getItem(key);
    return themeChoices.find((choice) => choice === stored) ?? 'system';
  } catch {
    // Expected where storage is switched off.
    return 'system';
  }
}
