import { PAGE, Sheet } from './sheet';

/** The lowest y that content may reach; the foot stands below. */
const BOTTOM = PAGE.height - 62;

/** A sheet with the y down to which it is filled; content that does not fit goes on the next page. */
export class Flow {
  readonly sheet = new Sheet();
  y: number = PAGE.margin;
  readonly #startPage: (flow: Flow) => void;

  /** @param startPage draws the head of every page after the first and moves y below it */
  constructor(startPage: (flow: Flow) => void) {
    this.#startPage = startPage;
  }

  /** Makes room for something `height` points tall that must stay together. @returns whether a page was begun */
  need(height: number): boolean {
    if (this.y + height <= BOTTOM) return false;
    this.sheet.newPage();
    this.y = PAGE.margin;
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
