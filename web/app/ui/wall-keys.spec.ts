import { neighbour } from './wall-keys';

const box = (x: number, y: number, width = 50) => ({ left: x, right: x + width, top: y, bottom: y + 46 });
// Two racks of two shelves: the first rack has two blocks on its top shelf.
const boxes = [box(0, 0, 24), box(26, 0, 24), box(0, 53), box(80, 0), box(80, 53)];

describe('arrow keys on the wall', () => {
  it('go along a shelf and on to the next rack', () => {
    expect(neighbour(boxes, 0, 'ArrowRight')).toBe(1);
    expect(neighbour(boxes, 1, 'ArrowRight')).toBe(3);
    expect(neighbour(boxes, 3, 'ArrowLeft')).toBe(1);
  });

  it('go up and down the shelves of a rack', () => {
    expect(neighbour(boxes, 1, 'ArrowDown')).toBe(2);
    expect(neighbour(boxes, 4, 'ArrowUp')).toBe(3);
  });

  it('stop at the edge and leave other keys alone', () => {
    expect(neighbour(boxes, 2, 'ArrowDown')).toBeNull();
    expect(neighbour(boxes, 2, 'Tab')).toBeNull();
    expect(neighbour(boxes, 0, 'Home')).toBeNull();
    expect(neighbour(boxes, 2, 'Home')).toBe(0);
    expect(neighbour(boxes, 0, 'End')).toBe(4);
  });
});
