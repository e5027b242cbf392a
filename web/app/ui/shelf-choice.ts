import { ChangeDetectionStrategy, Component, input, model } from '@angular/core';
import { MatFormField, MatLabel } from '@angular/material/form-field';
import { MatOptgroup, MatOption, MatSelect } from '@angular/material/select';

/** A shelf to choose, with what speaks for or against it. */
export interface ShelfOption {
  readonly id: string;
  /** "Rack 2, shelf 3" */
  readonly name: string;
  /** "room for 30", "6 free", "full" */
  readonly room: string;
}

/** Shelves of one room; the room's fitness for the wax in words. */
export interface ShelfGroup {
  readonly roomName: string;
  readonly fitness: string;
  readonly shelves: readonly ShelfOption[];
}

/** Chooses a shelf, room by room. */
@Component({
  selector: 'sr-shelf-choice',
  imports: [MatFormField, MatLabel, MatOptgroup, MatOption, MatSelect],
  template: `<mat-form-field subscriptSizing="dynamic">
    <mat-label>{{ label() }}</mat-label>
    <mat-select [value]="shelfId()" (selectionChange)="shelfId.set($event.value)">
      <mat-option value="">{{ none() }}</mat-option>
      @for (group of groups(); track group.roomName) {
        <mat-optgroup [label]="group.roomName + (group.fitness ? ': ' + group.fitness : '')">
          @for (shelf of group.shelves; track shelf.id) {
            <mat-option [value]="shelf.id">{{ shelf.name }} ({{ shelf.room }})</mat-option>
          }
        </mat-optgroup>
      }
    </mat-select>
  </mat-form-field>`,
  styles: `
    mat-form-field {
      inline-size: 100%;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ShelfChoice {
  readonly groups = input.required<readonly ShelfGroup[]>();
  readonly label = input('Shelf');
  readonly none = input('No shelf yet');
  readonly shelfId = model('');
}
