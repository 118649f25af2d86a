import { useEffect, useLayoutEffect, useRef, useState } from 'react';
import type { KeyboardEvent } from 'react';
import { VerdictMark } from '~/components/ui/VerdictMark';
import { formatValue } from '~/domain/bench/format';
import { pointLabel } from '~/domain/bench/judge-run';
import { newestReading } from '~/domain/bench/run-entry';
import type { Station } from '~/schemas/bench-station';
import { emptyLimitOf, entryOrder, isRead, needOf, neighbour, notesOf, unitHint } from './run-sheet';
import type { Grid, Judged, Point } from './run-sheet';
import { textOf } from './use-cells';
import type { Cells } from './use-cells';
import type { Entries } from './use-entries';

interface Props {
  grid: Grid;
  station: Station;
  judged: Judged;
  cells: Cells;
  entries: Entries;
  order: 'quantity' | 'band';
  editable: boolean;
}

const arrows: Record<string, { rows: number; columns: number }> = {
  ArrowUp: { rows: -1, columns: 0 },
  ArrowDown: { rows: 1, columns: 0 },
  ArrowLeft: { rows: 0, columns: -1 },
  ArrowRight: { rows: 0, columns: 1 },
};

/** Bands down, quantities across: one field a test point. */
export function ReadingGrid({ grid, station, judged, cells, entries, order, editable }: Props) {
  const inputs = useRef(new Map<number, HTMLInputElement>());
  const ids = entryOrder(grid, order);
  // While a computed cell is in hand, Tab still leads into the grid.
  const tabStop = ids.find((id) => id === cells.inHand) ?? ids[0];
  const goTo = (pointId: number): void => inputs.current.get(pointId)?.focus();
  const [isAlive, setIsAlive] = useState(false);
  // Until its script runs, the page would take keys that nobody hears.
  useEffect(() => {
    setIsAlive(true);
    const held = [...inputs.current.values()].find((input) => input === document.activeElement);
    held?.blur();
    held?.focus();
  }, []);

  // Read again empties the cell in hand, which then waits for what is read.
  useEffect(() => {
    if (cells.again && cells.inHand !== undefined) inputs.current.get(cells.inHand)?.focus();
  }, [cells.again, cells.inHand]);

  const onKeyDown = (event: KeyboardEvent<HTMLInputElement>, point: Point): void => {
    if (event.altKey || event.ctrlKey || event.metaKey) return;
    const way = arrows[event.key];
    if (event.key === 'Enter') {
      event.preventDefault();
      if (!cells.commit(true)) return;
      const at = ids.indexOf(point.id) + (event.shiftKey ? -1 : 1);
      const next = ids[at];
      if (next !== undefined) goTo(next);
      else selectSoon(event.currentTarget);
    } else if (event.key === 'Escape') {
      event.preventDefault();
      cells.restore();
    } else if (way !== undefined && (way.columns === 0 || isAtEdge(event.currentTarget, way.columns))) {
      event.preventDefault();
      goTo(neighbour(grid, point.id, way));
    }
  };

  return (
    <div className="table-frame" role="region" aria-label="Readings by band and quantity">
      <table className="bench-grid">
        <caption className="sr-only">Readings by band and quantity</caption>
        <thead>
          <tr>
            <th scope="col">Band</th>
            {grid.columns.map(({ key, label }) => (
              <th key={key} scope="col">
                {label}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {grid.rows.map((row) => (
            <tr key={row.key}>
              <th scope="row">{row.label}</th>
              {row.cells.map((point, column) => (
                <td key={grid.columns[column]?.key}>
                  {point !== undefined && !isRead(point) && (
                    <ComputedCell
                      {...{ point, station, judged, cells }}
                      label={row.isLabelled ? point.quantity.label : undefined}
                    />
                  )}
                  {point !== undefined && isRead(point) && (
                    <Cell
                      {...{ point, station, judged, cells, entries, editable, isAlive, onKeyDown }}
                      label={row.isLabelled ? point.quantity.label : undefined}
                      isTabStop={point.id === tabStop}
                      register={(input) => {
                        if (input === null) inputs.current.delete(point.id);
                        else inputs.current.set(point.id, input);
                      }}
                    />
                  )}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

/** Once the field shows what is edited, so that typing replaces it. */
function selectSoon(input: HTMLInputElement): void {
  requestAnimationFrame(() => input.select());
}

function isAtEdge(input: HTMLInputElement, columns: number): boolean {
  const { selectionStart: start, selectionEnd: end, value } = input;
  if (start === 0 && end === value.length) return true;
  return columns < 0 ? start === 0 && end === 0 : start === value.length;
}

interface CellProps extends Omit<Props, 'grid' | 'order'> {
  point: Point;
  /** The quantity, where the column does not say it. */
  label: string | undefined;
  isTabStop: boolean;
  isAlive: boolean;
  onKeyDown: (event: KeyboardEvent<HTMLInputElement>, point: Point) => void;
  register: (input: HTMLInputElement | null) => void;
}

function Cell({
  point,
  label,
  station,
  judged,
  cells,
  entries,
  editable,
  isAlive,
  isTabStop,
  onKeyDown,
  register,
}: CellProps) {
  const isInHand = cells.inHand === point.id;
  const judgement = judged.judgements.get(point.id);
  const unread = cells.unread.get(point.id);
  const waiting = entries.kept.filter(({ entry }) => entry.testPointId === point.id);
  const refused = waiting.find((one) => one.refused !== undefined);
  const newest = newestReading(station.sheet.readings, point.id);
  const value = judgement?.value ?? null;
  const atMost = judgement?.atMost === true ? '≤ ' : '';
  const rest = value === null ? '' : `${atMost}${formatValue(value, point.quantity)}`;
  const editing = cells.draft ?? (newest === undefined ? '' : textOf(newest));
  const wrong = unread !== undefined || refused !== undefined;
  const noteId = `note-${point.id}`;
  const own = useRef<HTMLInputElement>(null);
  const [entered, setEntered] = useState(0);
  // Before the next key: a frame later the first digit that is typed would be selected too, and lost.
  useLayoutEffect(() => {
    if (entered > 0) own.current?.select();
  }, [entered]);
  return (
    <label
      className={['bench-cell', isInHand && 'bench-cell-in-hand', wrong && 'bench-cell-unread']
        .filter(Boolean)
        .join(' ')}
    >
      {label !== undefined && <span className="quiet block">{label}</span>}
      <span className="flex items-center gap-1">
        <input
          ref={(input) => {
            own.current = input;
            register(input);
          }}
          aria-label={pointLabel(point)}
          aria-describedby={noteId}
          aria-invalid={wrong ? 'true' : undefined}
          tabIndex={isTabStop ? 0 : -1}
          readOnly={!editable || !isAlive}
          autoComplete="off"
          autoCapitalize="off"
          spellCheck={false}
          enterKeyHint="next"
          maxLength={60}
          placeholder={unitHint(point.quantity)}
          value={isInHand && editable ? editing : (unread?.text ?? refused?.entry.text ?? rest)}
          onFocus={() => {
            cells.enter(point.id);
            setEntered(entered + 1);
          }}
          onMouseDown={(event) => {
            if (document.activeElement === event.currentTarget) return;
            // The click would put the caret into the text that is selected on entering.
            event.preventDefault();
            event.currentTarget.focus();
          }}
          onChange={(event) => cells.type(event.currentTarget.value)}
          onBlur={() => cells.commit(false)}
          onKeyDown={(event) => onKeyDown(event, point)}
        />
        {judgement !== undefined && judgement.n > 0 && <VerdictMark verdict={judgement.verdict} bare />}
      </span>
      <span id={noteId} className="block font-mono text-quiet leading-snug text-ink-2">
        <span className="block">
          {needOf(point, judgement, emptyLimitOf(point, station, judged.judgements))}
        </span>
        {notesOf(point, judgement, station, judged.judgements).map((note) => (
          <span key={note} className="block">
            {note}
          </span>
        ))}
        {!point.required && <span className="block">not required</span>}
        {waiting.some((one) => one.refused === undefined) && <span className="block">saving</span>}
        {wrong && <span className="block font-semibold text-stop">not taken</span>}
      </span>
    </label>
  );
}

type ComputedProps = Pick<CellProps, 'point' | 'label' | 'station' | 'judged' | 'cells'>;

/** A cell that follows from others: shown, looked into with a click or Tab and Enter, and never typed into. */
function ComputedCell({ point, label, station, judged, cells }: ComputedProps) {
  const isInHand = cells.inHand === point.id;
  const judgement = judged.judgements.get(point.id);
  const value = judgement?.value ?? null;
  return (
    <button
      type="button"
      className={['bench-cell flex w-full flex-col justify-start text-left', isInHand && 'bench-cell-in-hand']
        .filter(Boolean)
        .join(' ')}
      aria-current={isInHand ? 'true' : undefined}
      onClick={() => cells.enter(point.id)}
    >
      <span className="sr-only">{pointLabel(point)}: </span>
      {label !== undefined && (
        <span className="quiet block" aria-hidden="true">
          {label}
        </span>
      )}
      <span className="flex min-h-7 items-center gap-1 font-mono text-[1.0625rem] tracking-tight">
        <span className="flex-1">{value === null ? '—' : formatValue(value, point.quantity)}</span>
        {judgement !== undefined && judgement.n > 0 && <VerdictMark verdict={judgement.verdict} bare />}
      </span>
      <span className="block font-mono text-quiet leading-snug text-ink-2">
        <span className="block">
          {needOf(point, judgement, emptyLimitOf(point, station, judged.judgements))}
        </span>
        <span className="block">computed</span>
        {!point.required && <span className="block">not required</span>}
      </span>
    </button>
  );
}
