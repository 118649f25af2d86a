import { Sheet } from './sheet';

/** Height that is kept for the foot, the lower margin included. */
const FOOT = 62;

/** A sheet with the y down to which it is filled; content that does not fit goes on the next page. */
export class Flow {
  readonly sheet: Sheet;
  /** Rows stand closer where the page is set smaller, so that more of them go on it. */
  readonly isDense: boolean;
  y: number;
  readonly #startPage: (flow: Flow) => void;

  /**
   * @param scale see {@link Sheet}
   * @param startPage draws the head of every page after the first and moves y below it
   */
  constructor(scale: number, startPage: (flow: Flow) => void) {
    this.sheet = new Sheet(scale);
    this.isDense = scale < 1;
    this.y = this.sheet.margin;
    this.#startPage = startPage;
  }

  /** Makes room for something `height` points tall that must stay together. @returns whether a page was begun */
  need(height: number): boolean {
    if (this.y + height <= this.sheet.height - FOOT) return false;
    this.sheet.newPage();
    this.y = this.sheet.margin;
    this.#startPage(this);
    return true;
  }

  /** Draws something on every page, knowing how many there are. */
  onEveryPage(draw: (page: number, count: number) => void): void {
    const count = this.sheet.pageCount;
    for (let page = 0; page < count; page += 1) {
      this.sheet.turnTo(page);
      draw(page + 1, count);
    }
  }
}
