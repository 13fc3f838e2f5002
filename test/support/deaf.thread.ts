/** Jobs that misbehave, for tests of the thread pool: one never looks at its flag, one dies, one waits to be told that it is enough. */
export default function runBadly(task: {
  kind: string;
  cancelFlag: Int32Array;
  port: { close(): void };
}): unknown {
  if (task.kind === 'deaf') {
    const until = Date.now() + 60_000;
    while (Date.now() < until);
  }
  if (task.kind === 'dies') process.exit(1);
  let flag = 0;
  if (task.kind === 'waits') {
    const until = Date.now() + 20_000;
    while (flag === 0 && Date.now() < until) flag = Atomics.load(task.cancelFlag, 0);
  }
  task.port.close();
  return { kind: 'done', output: task.kind === 'waits' ? flag : task.kind };
}
