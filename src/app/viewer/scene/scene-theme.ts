import { tintOf, okabeIto } from './palette';

/** The colours of the sheet, as CSS colours that three.js reads (`rgb(…)` or `#rrggbb`). */
export interface SceneTheme {
  readonly isDark: boolean;
  readonly paper: string;
  readonly graphite: string;
  readonly grid: string;
  /** Selection and envelope. */
  readonly ink: string;
  /** Seams. */
  readonly copper: string;
}

/** White mixed into tints on a light sheet, slate on a dark one. */
const tintGround = { light: '#ffffff', dark: '#58626c' } as const;
const tintShare = { light: 0.42, dark: 0.5 } as const;

/** The tint of a palette number on this sheet. */
export function pieceTint(colour: number, isDark: boolean): string {
  const key = isDark ? 'dark' : 'light';
  return tintOf(okabeIto[colour % okabeIto.length]!, tintGround[key], tintShare[key]);
}

/** The model as one body, before it is cut. */
export function bodyTint(isDark: boolean): string {
  return isDark ? '#8f979f' : '#e9e4d8';
}
