export function readSettings(env?: Record<string, string | undefined>): {
  root: string;
  port: number;
  host: string;
  data: string;
  logs: string;
  databaseUrl: string | null;
};
