import { Injectable } from '@angular/core';

const key = 'seamwright.session-renewed-at';

/** When the access token was last renewed, in ms since 1970; shared by all tabs of this browser. */
@Injectable({ providedIn: 'root' })
export class RenewalClock {
  private here = 0;

  mark(nowMs = Date.now()): void {
    this.here = nowMs;
    try {
      localStorage.setItem(key, String(nowMs));
    } catch {
      // Expected where storage is switched off: this tab then keeps its own time.
    }
  }

  /** 0 when nobody knows. */
  renewedAtMs(): number {
    try {
      return Math.max(this.here, Number(localStorage.getItem(key)) || 0);
    } catch {
      // Expected where storage is switched off.
      return this.here;
    }
  }
}
