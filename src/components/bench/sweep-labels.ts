/** A text that stands beside a point of a plot. */
export interface PlotLabel {
  key: string;
  text: string;
  x: number;
  y: number;
  tone: 'patina' | 'copper' | 'stop' | 'slate';
  /** Whether a dot marks its point. */
  isMarked: boolean;
}

/** A label where it has its place. */
export interface PlacedLabel extends PlotLabel {
  left: number;
  top: number;
}

const letterWidth = 8.2;
const lineHeight = 15;

interface Frame {
  left: number;
  right: number;
  top: number;
  bottom: number;
}

/**
 * Places labels so that none covers another or the point of another, the first ones first: each stands above its point, moved to the left at the right edge and
 * upwards, then downwards, until it is free. One that finds no place is left out; the table has it.
 */
export function placeLabels(labels: readonly PlotLabel[], frame: Frame): PlacedLabel[] {
  const placed: (PlacedLabel & { width: number })[] = [];
  const dots = labels.filter(({ isMarked }) => isMarked);
  for (const label of labels) {
    const width = label.text.length * letterWidth;
    const left = Math.min(Math.max(frame.left, label.x + 5), frame.right - width);
    const start = Math.max(frame.top + lineHeight, label.y - 6);
    const steps = Math.ceil((frame.bottom - frame.top) / lineHeight);
    const tries = Array.from({ length: 2 * steps }, (_, index) =>
      index % 2 === 0 ? start - (index / 2) * lineHeight : start + ((index + 1) / 2) * lineHeight,
    );
    const top = tries.find(
      (y) =>
        y >= frame.top + lineHeight &&
        y <= frame.bottom &&
        placed.every(
          (other) =>
            left + width + 4 < other.left ||
            other.left + other.width + 4 < left ||
            Math.abs(other.top - y) >= lineHeight,
        ) &&
        dots.every(
          (dot) =>
            dot === label ||
            dot.x < left - 4 ||
            dot.x > left + width + 4 ||
            dot.y < y - lineHeight ||
            dot.y > y + 4,
        ),
    );
    if (top !== undefined) placed.push({ ...label, left, top, width });
  }
  return placed;
}
