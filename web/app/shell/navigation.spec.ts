import { isCurrent } from './navigation';

describe('the page that is shown', () => {
  it('is Rooms at the root and on a room’s own page', () => {
    expect(isCurrent('/', '/')).toBe(true);
    expect(isCurrent('/', '/rooms/4711?period=7d')).toBe(true);
    expect(isCurrent('/', '/racks')).toBe(false);
  });

  it('is told apart from pages whose names begin alike', () => {
    expect(isCurrent('/batches', '/batches/4711#tests')).toBe(true);
    expect(isCurrent('/batches', '/batches-old')).toBe(false);
  });
});
