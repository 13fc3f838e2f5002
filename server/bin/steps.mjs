// One plain line a step, with its time.

const seconds = (ms) => `${(ms / 1000).toFixed(1)} s`;

/** Does a step: its name appears at once, its time when it is done. */
export async function step(name, work) {
  const started = performance.now();
  process.stdout.write(`${name} … `);
  try {
    const result = await work();
    process.stdout.write(`${seconds(performance.now() - started)}\n`);
    return result;
  } catch (error) {
    process.stdout.write('failed\n');
    throw error;
  }
}

/** A step that someone else has done. */
export function doneStep(name, ms) {
  process.stdout.write(`${name} … ${seconds(ms)}\n`);
}
