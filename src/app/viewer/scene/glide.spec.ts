import { Glide } from './glide';

describe('Glide', () => {
  it('runs from 0 to 1 without going back and then ends', () => {
    const glide = new Glide(() => false);
    expect(glide.start(1_000)).toBe(true);
    let last = -1;
    for (let nowMs = 1_000; glide.isRunning && nowMs < 5_000; nowMs += 10) {
      const at = glide.at(nowMs);
      expect(at).toBeGreaterThanOrEqual(last);
      last = at;
    }
    expect(last).toBe(1);
    expect(glide.isRunning).toBe(false);
  });

  it('is over at once for people who want less motion', () => {
    const glide = new Glide(() => true);
    expect(glide.start(0)).toBe(false);
    expect(glide.at(0)).toBe(1);
  });

  it('starts at 0 even when the first frame carries an older time', () => {
    const glide = new Glide(() => false);
    glide.start(1_000);
    expect(glide.at(990)).toBe(0);
  });
});
