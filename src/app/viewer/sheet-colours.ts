import { type SceneTheme } from './scene/scene-theme';

/** Where the scene's colours come from. */
const tokens = {
  paper: '--mat-sys-surface',
  graphite: '--mat-sys-on-surface',
  grid: '--mat-sys-outline',
  ink: '--mat-sys-primary',
  copper: '--sw-seam',
} as const;

/**
 * The theme's colours as the browser resolves them at an element. Tokens hold `light-dark(…)`, which
 * only a real property resolves, so a probe is coloured with each of them and read back.
 */
export function readSheetColours(host: HTMLElement, isDark: boolean): SceneTheme {
  const probe = host.ownerDocument.createElement('span');
  probe.hidden = true;
  host.append(probe);
  const read = (token: string): string => {
    probe.style.color = `var(${token})`;
    return getComputedStyle(probe).color;
  };
  const colours = {
    isDark,
    paper: read(tokens.paper),
    graphite: read(tokens.graphite),
    grid: read(tokens.grid),
    ink: read(tokens.ink),
    copper: read(tokens.copper),
  };
  probe.remove();
  return colours;
}
