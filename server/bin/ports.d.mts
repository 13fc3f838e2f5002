export function freePort(): Promise<number>;
export function whyPortIsUnusable(port: number, host: string): Promise<string | null>;
