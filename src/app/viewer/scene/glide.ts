/** Length of a move, ms. */
const GLIDE_MS = 420;

/** A timed move from 0 to 1 that eases in and out; with reduced motion it is over at once. */
export class Glide {
  private startMs: number | null = null;

  constructor(private readonly prefersReducedMotion: () => boolean) {}

  get isRunning(): boolean {
    return this.startMs !== null;
  }

  /** Starts anew. Returns whether there is anything to wait for. */
  start(nowMs: number): boolean {
    this.startMs = this.prefersReducedMotion() ? null : nowMs;
    return this.isRunning;
  }

  stop(): void {
    this.startMs = null;
  }

  /** How far the move is, eased; ends the move when it is over. */
  at(nowMs: number): number {
    if (this.startMs === null) return 1;
    const linear = (nowMs - this.startMs) / GLIDE_MS;
    if (linear >= 1) {
      this.startMs = null;
      return 1;
    }
    const clamped = Math.max(0, linear);
    return clamped * clamped * (3 - 2 * clamped);
  }
}
