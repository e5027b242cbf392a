import { ChangeDetectionStrategy, Component, input, model } from '@angular/core';
import { MatButtonToggle, MatButtonToggleGroup } from '@angular/material/button-toggle';

export type ChartView = 'chart' | 'table';

/**
 * Frame of a chart: title, a sentence that says what it shows, and the switch to the same figures as a table.
 * Content: an element with attribute `chart` and one with attribute `table`, each drawn by the parent for its view.
 */
@Component({
  selector: 'sr-chart-shell',
  imports: [MatButtonToggle, MatButtonToggleGroup],
  template: `<div class="head">
      <div>
        <h2>{{ heading() }}</h2>
        @if (summary()) {
          <p class="sr-muted">{{ summary() }}</p>
        }
      </div>
      <mat-button-toggle-group
        hideSingleSelectionIndicator
        [value]="view()"
        (change)="view.set($event.value)"
        aria-label="Show as"
      >
        <mat-button-toggle value="chart">Chart</mat-button-toggle>
        <mat-button-toggle value="table">Table</mat-button-toggle>
      </mat-button-toggle-group>
    </div>
    <ng-content select="[tools]" />
    @if (view() === 'chart') {
      <ng-content select="[chart]" />
    } @else {
      <ng-content select="[table]" />
    }`,
  styles: `
    :host {
      display: grid;
      grid-template-columns: minmax(0, 1fr);
      gap: 12px;
      min-inline-size: 0;
    }
    .head {
      display: flex;
      flex-wrap: wrap;
      gap: 12px;
      justify-content: space-between;
      align-items: flex-start;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ChartShell {
  readonly heading = input.required<string>();
  readonly summary = input('');
  readonly view = model<ChartView>('chart');
}
