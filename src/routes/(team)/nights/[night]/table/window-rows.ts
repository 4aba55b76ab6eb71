/** The part of a long list that is drawn, and the blank heights that stand for the rest. Pixels. */
export interface RowWindow {
  first: number;
  /** One past the last row drawn. */
  end: number;
  above: number;
  below: number;
}

/** Rows drawn beyond each edge of the view, so that a fast wheel meets rows, not blank. */
const SPARE = 12;

/** Which rows of equal height a view shows. Scrolled past the end, as when a list gets shorter, it shows the last ones. */
export function windowRows(
  view: { scrollTop: number; height: number },
  rowHeight: number,
  count: number,
  spare = SPARE,
): RowWindow {
  if (!(rowHeight > 0)) return { first: 0, end: count, above: 0, below: 0 };
  const seen = Math.ceil(view.height / rowHeight) + 1;
  const top = Math.min(Math.floor(Math.max(0, view.scrollTop) / rowHeight), Math.max(0, count - seen));
  // An even first row keeps anything striped from flickering, and moves the window in larger steps.
  const first = Math.max(0, 2 * Math.floor((top - spare) / 2));
  const end = Math.min(count, top + seen + spare);
  return { first, end, above: first * rowHeight, below: (count - end) * rowHeight };
}

/** The scroll position nearest to the present one that shows a row whole below a head that covers the view's top. */
export function scrollToShow(
  row: number,
  view: { scrollTop: number; height: number },
  rowHeight: number,
  headHeight: number,
): number {
  const top = row * rowHeight;
  if (top < view.scrollTop) return top;
  const room = view.height - headHeight;
  return top + rowHeight > view.scrollTop + room ? Math.max(0, top + rowHeight - room) : view.scrollTop;
}
