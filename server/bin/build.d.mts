export interface Part {
  readonly name: string;
}
export type RunTool = (
  command: string,
  args: readonly string[],
  options: { cwd: string },
) => Promise<{ status: number | null; said: string }>;
export function staleParts(root: string): Part[];
export function buildParts(run: RunTool, root: string, parts: readonly Part[]): Promise<void>;
