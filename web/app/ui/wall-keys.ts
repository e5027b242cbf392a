interface Box {
  readonly left: number;
  readonly right: number;
  readonly top: number;
  readonly bottom: number;
}

const SIDEWAYS_COST = 3;

/**
 * Which box an arrow key leads to: the nearest one in that direction, boxes straight ahead before boxes aside;
 * Home and End lead to the first and last. Null for other keys and at the edge.
 */
export function neighbour(boxes: readonly Box[], from: number, key: string): number | null {
  if (key === 'Home') return from === 0 ? null : 0;
  if (key === 'End') return from === boxes.length - 1 ? null : boxes.length - 1;
  const here = boxes[from];
  const along = ALONG[key];
  if (!here || !along) return null;
  let best: number | null = null;
  let least = Infinity;
  boxes.forEach((box, index) => {
    const { ahead, aside } = along(middle(here), middle(box));
    if (index === from || ahead <= 1) return;
    const cost = ahead + SIDEWAYS_COST * aside;
    if (cost < least) {
      least = cost;
      best = index;
    }
  });
  return best;
}

interface Point {
  readonly x: number;
  readonly y: number;
}

const ALONG: Record<string, ((a: Point, b: Point) => { ahead: number; aside: number }) | undefined> = {
  ArrowRight: (a, b) => ({ ahead: b.x - a.x, aside: Math.abs(b.y - a.y) }),
  ArrowLeft: (a, b) => ({ ahead: a.x - b.x, aside: Math.abs(b.y - a.y) }),
  ArrowDown: (a, b) => ({ ahead: b.y - a.y, aside: Math.abs(b.x - a.x) }),
  ArrowUp: (a, b) => ({ ahead: a.y - b.y, aside: Math.abs(b.x - a.x) }),
};

function middle(box: Box): Point {
  return { x: (box.left + box.right) / 2, y: (box.top + box.bottom) / 2 };
}
