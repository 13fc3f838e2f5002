/** What a bench hands to run.mjs: `export async function bench(): Promise<BenchTable>`. */
export interface BenchTable {
  readonly title: string;
  readonly columns: readonly string[];
  /** One cell a column; the first names the row. */
  readonly rows: readonly (readonly (string | number)[])[];
  readonly targets: readonly BenchTarget[];
}

export interface BenchTarget {
  readonly what: string;
  readonly measured: number;
  readonly limit: number;
  readonly met: boolean;
}

/** A target that a smaller number meets. */
export function atMost(what: string, measured: number, limit: number): BenchTarget {
  return { what, measured, limit, met: measured <= limit };
}
