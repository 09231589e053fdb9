/** One table of the benchmark. */
export interface Section {
  lines: string[];
  /** Targets that were missed. */
  missed: number;
}

/** Prints a table line by line as it grows, and keeps it. */
export class Table implements Section {
  readonly lines: string[] = [];
  missed = 0;

  constructor(columns: readonly string[]) {
    this.print(columns);
    this.print(columns.map(() => '---'));
  }

  /** @param missed what was missed in this line; none means that its targets are met */
  add(cells: readonly string[], missed: readonly string[], note = ''): void {
    this.missed += missed.length;
    this.print([...cells, missed.join('; ') || 'met'], note);
  }

  private print(cells: readonly string[], note = ''): void {
    const line = `| ${cells.join(' | ')} |`;
    this.lines.push(line);
    console.log(line, note);
  }
}
