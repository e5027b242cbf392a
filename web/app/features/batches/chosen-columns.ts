import { Injectable, signal } from '@angular/core';
import { type Column, COLUMNS, NARROW_COLUMNS, USUAL_COLUMNS } from './batch-list';

const KEY = 'stillroom.batch-columns';

/** The columns of the list of batches, kept on this device. */
@Injectable({ providedIn: 'root' })
export class ChosenColumns {
  private readonly writableColumns = signal<readonly Column[]>(remembered());

  readonly columns = this.writableColumns.asReadonly();

  choose(columns: readonly Column[]): void {
    this.writableColumns.set(columns);
    localStorage.setItem(KEY, columns.join(' '));
  }
}

function remembered(): readonly Column[] {
  const kept = localStorage.getItem(KEY)?.split(' ');
  if (kept) return COLUMNS.filter((column) => kept.includes(column));
  return matchMedia('(max-width: 720px)').matches ? NARROW_COLUMNS : USUAL_COLUMNS;
}
