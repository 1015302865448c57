/** Inside a table the arrow keys move between what can be focused: up and down by row, left and right within one. */

const FOCUSABLE = 'a[href], button, input, select, summary';

function focusables(row: Element | undefined): HTMLElement[] {
	return row ? [...row.querySelectorAll<HTMLElement>(FOCUSABLE)] : [];
}

/** Handles a key pressed inside a table; keys that type or choose keep their own meaning. */
export function moveByArrow(event: KeyboardEvent): void {
	const from = event.target;
	if (!(from instanceof HTMLElement) || from.matches('input, select, textarea')) return;
	const row = from.closest('tr');
	const rows = [...(row?.closest('table')?.rows ?? [])].filter((other) => focusables(other).length > 0);
	if (!row || !event.key.startsWith('Arrow')) return;
	const here = focusables(row);
	const at = here.indexOf(from);
	const beside = event.key === 'ArrowDown' ? 1 : event.key === 'ArrowUp' ? -1 : 0;
	const next = beside === 0 ? here : focusables(rows[rows.indexOf(row) + beside]);
	const column = event.key === 'ArrowRight' ? at + 1 : event.key === 'ArrowLeft' ? at - 1 : at;
	const target = next[Math.min(column, next.length - 1)];
	if (!target) return;
	event.preventDefault();
	target.focus();
}
