import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';

/** The numbers a drawing needs, mm; null while a field is empty. */
export interface EnvelopeMeasures {
  readonly shape: 'rectangular' | 'round';
  readonly widthMm: number | null;
  readonly depthMm: number | null;
  readonly diameterMm: number | null;
  readonly heightMm: number | null;
  readonly marginMm: number | null;
}

/** Drawing units that the longest side of the two views takes. */
const longestSide = 180;

/** Front and top view of a build volume, to one scale, with its dimensions; the margin is dashed. */
@Component({
  selector: 'sw-envelope-drawing',
  templateUrl: './envelope-drawing.html',
  styleUrl: './envelope-drawing.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class EnvelopeDrawing {
  readonly measures = input.required<EnvelopeMeasures>();

  protected readonly sheet = computed(() => {
    const { shape, widthMm, depthMm, diameterMm, heightMm, marginMm } = this.measures();
    const x = shape === 'round' ? diameterMm : widthMm;
    const y = shape === 'round' ? diameterMm : depthMm;
    if (!isLength(x) || !isLength(y) || !isLength(heightMm)) return null;
    const unit = longestSide / Math.max(x, y, heightMm);
    const width = x * unit;
    const depth = y * unit;
    const height = heightMm * unit;
    const margin = Math.min(Math.max(marginMm ?? 0, 0) * unit, width / 2, depth / 2);
    return {
      isRound: shape === 'round',
      width,
      depth,
      height,
      margin,
      topY: height + 40,
      box: `-40 -12 ${width + 88} ${height + depth + 84}`,
      across: shape === 'round' ? `⌀ ${x}` : `${x}`,
      deep: shape === 'round' ? '' : `${y}`,
      high: `${heightMm}`,
    };
  });
  protected readonly words = computed(() => {
    const { shape, widthMm, depthMm, diameterMm, heightMm, marginMm } = this.measures();
    const bed =
      shape === 'round'
        ? `round, ${diameterMm} mm across`
        : `${widthMm} mm wide and ${depthMm} mm deep`;
    return `Drawing of the envelope: ${bed}, ${heightMm} mm high, with a margin of ${marginMm} mm.`;
  });
}

function isLength(value: number | null): value is number {
  return value !== null && Number.isFinite(value) && value > 0;
}
