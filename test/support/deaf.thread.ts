/** A job that never looks at its cancellation, and one that dies, for tests of the thread pool. */
export default function runBadly(task: { kind: string; port: { close(): void } }): unknown {
  if (task.kind === 'deaf') {
    const until = Date.now() + 60_000;
    while (Date.now() < until);
  }
  if (task.kind === 'dies') process.exit(1);
  task.port.close();
  return { kind: 'done', output: task.kind };
}
