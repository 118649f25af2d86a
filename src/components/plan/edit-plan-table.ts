type Cell = HTMLInputElement | HTMLSelectElement;

const isCell = (target: EventTarget | null): target is Cell =>
  target instanceof HTMLInputElement || target instanceof HTMLSelectElement;

/** Lets the rows of a plan be added, removed and moved, and the table be filled without a mouse. */
export function editPlanTable(table: HTMLTableElement): void {
  const body = table.tBodies[0];
  const form = table.closest('form');
  const first = body?.rows[0];
  if (body === undefined || form === null || first === undefined) return;
  const blank = emptied(first);
  let isChanged = false;

  for (const hidden of form.querySelectorAll<HTMLElement>(
    '[data-row-buttons], [data-row-buttons-head], [data-with-script]',
  )) {
    hidden.hidden = false;
  }
  for (const shown of form.querySelectorAll<HTMLElement>('[data-without-script]')) shown.hidden = true;

  const rows = () => [...body.rows];
  const renumber = () => {
    isChanged = true;
    rows().forEach((row, index) => {
      for (const cell of row.querySelectorAll<Cell>('input, select')) {
        const column = cell.dataset['column'] ?? 'number';
        cell.setAttribute('aria-label', `Row ${String(index + 1)}, ${column}`);
        if (cell.name === 'no') cell.value = String(index + 1);
      }
    });
  };
  const add = (): HTMLTableRowElement => {
    const row = emptied(blank);
    body.append(row);
    renumber();
    return row;
  };
  const move = (row: HTMLTableRowElement, by: -1 | 1) => {
    const other = rows()[row.sectionRowIndex + by];
    if (other === undefined) return;
    if (by < 0) other.before(row);
    else other.after(row);
    renumber();
  };
  const goTo = (row: HTMLTableRowElement | undefined, name: string) => {
    row?.querySelector<Cell>(`[name="${name}"]`)?.focus();
  };

  form.addEventListener('click', (event) => {
    if (!(event.target instanceof HTMLButtonElement)) return;
    const row = event.target.closest('tr');
    if (event.target.matches('[data-row-add]')) goTo(add(), 'quantity');
    if (row === null) return;
    if (event.target.matches('[data-row-up]')) move(row, -1);
    if (event.target.matches('[data-row-down]')) move(row, 1);
    if (event.target.matches('[data-row-up], [data-row-down]')) event.target.focus();
    if (event.target.matches('[data-row-remove]')) {
      const next = rows()[row.sectionRowIndex + 1] ?? rows()[row.sectionRowIndex - 1];
      if (next === undefined) add();
      row.remove();
      renumber();
      goTo(next ?? rows()[0], 'quantity');
    }
  });

  table.addEventListener('keydown', (event) => {
    const { target } = event;
    if (!isCell(target)) return;
    const row = target.closest('tr');
    if (row === null) return;
    const by = event.key === 'ArrowUp' ? -1 : event.key === 'ArrowDown' ? 1 : null;
    if (event.altKey && by !== null) {
      event.preventDefault();
      move(row, by);
      target.focus();
    } else if (event.key === 'Enter') {
      event.preventDefault();
      goTo(
        rows()[row.sectionRowIndex + (event.shiftKey ? -1 : 1)] ?? (event.shiftKey ? undefined : add()),
        target.name,
      );
    } else if (by !== null && target instanceof HTMLInputElement) {
      event.preventDefault();
      goTo(rows()[row.sectionRowIndex + by], target.name);
    }
  });

  // A limit by rule is a legal one, which is decided with a guard band.
  table.addEventListener('change', ({ target }) => {
    isChanged = true;
    if (!(target instanceof HTMLSelectElement) || target.name !== 'limitRule' || target.value !== 'spurious')
      return;
    const decision = target.closest('tr')?.querySelector<HTMLSelectElement>('[name="decision"]');
    if (decision) decision.value = 'guarded';
  });
  form.addEventListener('input', () => (isChanged = true));
  form.addEventListener('submit', () => (isChanged = false));
  window.addEventListener('beforeunload', (event) => {
    if (isChanged) event.preventDefault();
  });
}

function emptied(row: HTMLTableRowElement): HTMLTableRowElement {
  const copy = document.importNode(row, true);
  for (const error of copy.querySelectorAll('.field-error')) error.remove();
  for (const cell of copy.querySelectorAll<Cell>('input, select')) {
    cell.removeAttribute('aria-invalid');
    cell.removeAttribute('aria-describedby');
    if (cell instanceof HTMLSelectElement) cell.selectedIndex = 0;
    else cell.value = '';
  }
  return copy;
}
