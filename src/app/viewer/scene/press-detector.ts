/** A press that moves farther than this turns the view; one that does not is a click. */
const CLICK_SLACK_PX = 5;

/** Tells clicks on a canvas from drags. */
export class PressDetector {
  private pressed: { x: number; y: number; id: number } | null = null;

  /** @param onClick px from the upper left of the canvas */
  constructor(
    private readonly canvas: HTMLCanvasElement,
    private readonly onClick: (xPx: number, yPx: number) => void,
  ) {
    canvas.addEventListener('pointerdown', this.press);
    canvas.addEventListener('pointerup', this.release);
  }

  dispose(): void {
    this.canvas.removeEventListener('pointerdown', this.press);
    this.canvas.removeEventListener('pointerup', this.release);
  }

  private readonly press = (event: PointerEvent): void => {
    const isPlain = event.isPrimary && event.button === 0;
    this.pressed = isPlain ? { x: event.clientX, y: event.clientY, id: event.pointerId } : null;
  };

  private readonly release = (event: PointerEvent): void => {
    const from = this.pressed;
    this.pressed = null;
    if (!from || from.id !== event.pointerId) return;
    const movedPx = Math.hypot(event.clientX - from.x, event.clientY - from.y);
    if (movedPx > CLICK_SLACK_PX) return;
    const frame = this.canvas.getBoundingClientRect();
    this.onClick(event.clientX - frame.left, event.clientY - frame.top);
  };
}
