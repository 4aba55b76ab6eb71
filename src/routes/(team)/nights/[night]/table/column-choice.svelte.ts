import { columnsOf, columnsText, COLUMNS, type Column } from './columns';

/** Where a browser keeps the choice: one for every night, as a person's eyes are the same on all of them. */
const KEY = 'farglow-night-columns';

function kept(): string | null {
  try {
    return localStorage.getItem(KEY);
  } catch {
    // A browser that keeps nothing shows the first choice each time.
    return null;
  }
}

/** The columns that a person chose to see, kept in their browser. */
export class ColumnChoice {
  columns = $state<Column[]>(columnsOf(null));

  /** Reads what is kept; called in the browser alone, so that the server's page is the same for all. */
  read(): void {
    this.columns = columnsOf(kept());
  }

  set(column: Column, shown: boolean): void {
    this.columns = COLUMNS.filter((other) => (other === column ? shown : this.columns.includes(other)));
    try {
      localStorage.setItem(KEY, columnsText(this.columns));
    } catch {
      // It holds until the page is left.
    }
  }

  /** Back to the first choice. */
  reset(): void {
    this.columns = columnsOf(null);
    try {
      localStorage.removeItem(KEY);
    } catch {
      // Nothing was kept.
    }
  }
}
