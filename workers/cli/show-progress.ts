/** A line that is written over and over on a terminal; nothing at all anywhere else. */
export function showProgress(output: NodeJS.WriteStream): {
  report: (stage: string, fraction: number) => void;
  clear: () => void;
} {
  const LEAST_GAP_MS = 100;
  let last = -Infinity;
  const isShown = output.isTTY === true;
  return {
    report: (stage, fraction) => {
      const now = performance.now();
      if (!isShown || now - last < LEAST_GAP_MS) return;
      last = now;
      output.write(`\r\u001b[K${stage} … ${Math.round(100 * fraction)} %`);
    },
    clear: () => {
      if (isShown && last > -Infinity) output.write('\r\u001b[K');
    },
  };
}
