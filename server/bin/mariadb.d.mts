import type { ChildProcess } from 'node:child_process';

export interface RunningMariadb {
  readonly child: ChildProcess;
  readonly port: number;
  readonly urlOf: (database: string) => string;
  readonly stop: () => Promise<void>;
}

export function locateMariadb(): { server: string; installer: string } | null;
export function startMariadb(options: {
  dataDir: string;
  database: string;
  throwAway?: boolean;
}): Promise<RunningMariadb>;
