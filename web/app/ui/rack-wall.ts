import {
  ChangeDetectionStrategy,
  Component,
  computed,
  ElementRef,
  inject,
  input,
  signal,
} from '@angular/core';
import { neighbour } from './wall-keys';
import type { RackView } from './wall-layout';
import { WaxBlock } from './wax-block';

export type WallWash = 'fine' | 'heat' | 'cold' | 'damp' | 'swinging' | 'silent' | 'never-heard';

/**
 * The wall of a room: its racks side by side, shelves in their true order, each batch a block on its shelf, over a
 * wash that tells the room's condition. One stop for the Tab key; arrow keys go from block to block.
 */
@Component({
  selector: 'sr-rack-wall',
  imports: [WaxBlock],
  templateUrl: './rack-wall.html',
  styleUrl: './rack-wall.scss',
  host: {
    '(keydown)': 'go($event)',
    '(focusin)': 'arrived($event)',
    '[class]': "'wash-' + wash() + (large() ? ' large' : '')",
  },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RackWall {
  readonly racks = input.required<readonly RackView[]>();
  readonly wash = input<WallWash>('fine');
  /** Names the wall for screen readers, e.g. "Racks of the Loft". */
  readonly label = input.required<string>();
  /** Drawn large on the room's own page. */
  readonly large = input(false);

  private readonly host = inject<ElementRef<HTMLElement>>(ElementRef).nativeElement;
  private readonly visited = signal<string | null>(null);

  /** The block that the Tab key reaches: the one visited last, or the first. */
  protected readonly tabStop = computed(() => {
    const ids = this.racks().flatMap((rack) =>
      rack.shelves.flatMap((shelf) => shelf.blocks.map((block) => block.id)),
    );
    const visited = this.visited();
    return visited !== null && ids.includes(visited) ? visited : ids[0];
  });

  /** Its share of the shelf, but wide enough to read its code where there is room. */
  protected width(share: number): string {
    return `max(${(share * 100).toFixed(1)}%, 50px)`;
  }

  protected arrived(event: FocusEvent): void {
    this.visited.set(
      (event.target as HTMLElement).closest('[data-block]')?.getAttribute('data-block') ?? null,
    );
  }

  protected go(event: KeyboardEvent): void {
    const links = [...this.host.querySelectorAll<HTMLElement>('a')];
    const from = links.indexOf(event.target as HTMLElement);
    if (from < 0) return;
    const to = neighbour(
      links.map((link) => link.getBoundingClientRect()),
      from,
      event.key,
    );
    if (to === null) return;
    event.preventDefault();
    links[to]?.focus();
  }
}
