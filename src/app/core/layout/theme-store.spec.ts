import { TestBed } from '@angular/core/testing';
import { ThemeStore } from './theme-store';

describe('ThemeStore', () => {
  beforeEach(() => localStorage.clear());
  afterEach(() => (document.documentElement.style.colorScheme = ''));

  it('follows the system until a person chooses', () => {
    const store = TestBed.inject(ThemeStore);
    TestBed.tick();
    expect(store.choice()).toBe('system');
    expect(document.documentElement.style.colorScheme).toBe('');
  });

  it('sets the colour scheme of the document and remembers the choice', () => {
    TestBed.inject(ThemeStore).choose('dark');
    TestBed.tick();
    expect(document.documentElement.style.colorScheme).toBe('dark');
    TestBed.resetTestingModule();
    const later = TestBed.inject(ThemeStore);
    expect(later.choice()).toBe('dark');
    expect(later.isDark()).toBe(true);
  });

  it('ignores a stored word it does not know', () => {
    localStorage.setItem('seamwright.theme', 'plaid');
    expect(TestBed.inject(ThemeStore).choice()).toBe('system');
  });
});
