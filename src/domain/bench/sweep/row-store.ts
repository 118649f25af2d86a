import type { ScannedRow } from './scan-rows';

/** A row of numbers as it was scanned. */
export interface StoredRows {
  rows: number;
  /** Row after row. */
  values: Float64Array;
  /** Unit glued to the numbers of each column in the first row. */
  firstUnits: readonly string[];
  /** Units that differ from those of the first row, by their place in `values`. */
  otherUnits: ReadonlyMap<number, string>;
}

/** Rows of numbers in blocks, kept in one array that grows. */
export class RowStore {
  #values = new Float64Array(4096);
  #rows = 0;
  readonly #blocks: { firstRow: number; rows: number; units: string[]; otherUnits: Map<number, string> }[] =
    [];

  constructor(private readonly width: number) {}

  /** Begins a block; what is added next is its first row, against whose units the others are held. */
  open(): void {
    this.#blocks.push({ firstRow: this.#rows, rows: 0, units: [], otherUnits: new Map() });
  }

  add({ values, units }: ScannedRow): void {
    const block = this.#blocks[this.#blocks.length - 1];
    if (block === undefined) return;
    const { width } = this;
    const place = this.#rows * width;
    if (place + width > this.#values.length) {
      const grown = new Float64Array(2 * (place + width));
      grown.set(this.#values);
      this.#values = grown;
    }
    if (block.rows === 0) block.units = units.slice();
    for (let column = 0; column < width; column += 1) {
      this.#values[place + column] = values[column] ?? NaN;
      const unit = units[column] ?? '';
      if (unit !== block.units[column]) block.otherUnits.set(block.rows * width + column, unit);
    }
    block.rows += 1;
    this.#rows += 1;
  }

  /** Number of rows of each block. */
  sizes(): number[] {
    return this.#blocks.map(({ rows }) => rows);
  }

  block(index: number): StoredRows {
    const { width } = this;
    const { firstRow = 0, rows = 0, units = [], otherUnits = new Map() } = this.#blocks[index] ?? {};
    const values = this.#values.subarray(firstRow * width, (firstRow + rows) * width);
    return { rows, values, firstUnits: units, otherUnits };
  }
}
