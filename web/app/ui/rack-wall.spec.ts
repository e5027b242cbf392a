import { TestBed } from '@angular/core/testing';
import { provideRouter } from '@angular/router';
import { aBatch, aRack } from '#shared/words/test-floor';
import { RackWall } from './rack-wall';
import { wallLayout } from './wall-layout';

const NOW = Date.parse('2026-05-04T10:00:00.000Z');
const rack = aRack(1);
const [top, bottom] = rack.shelves.map((shelf) => shelf.id);

describe('the wall of racks', () => {
  const draw = async (batches: ReturnType<typeof aBatch>[]) => {
    TestBed.configureTestingModule({ providers: [provideRouter([])] });
    const fixture = TestBed.createComponent(RackWall);
    const words = (batch: { code: string }) => ({
      what: 'test',
      when: 'Fri 8 May',
      label: `${batch.code}, test Fri 8 May`,
    });
    fixture.componentRef.setInput('racks', wallLayout([rack], batches, words, NOW));
    fixture.componentRef.setInput('label', 'Racks of the Loft');
    await fixture.whenStable();
    return { fixture, host: fixture.nativeElement as HTMLElement };
  };

  it('says what stands on each shelf', async () => {
    const { host } = await draw([aBatch(1, { shelfId: bottom })]);
    const shelves = [...host.querySelectorAll('.shelf .sr-only')].map((shelf) =>
      shelf.textContent?.replace(/\s+/g, ' ').trim(),
    );
    expect(shelves).toEqual(['Shelf 1, empty', 'Shelf 2, 24 of 48 vessels']);
    const link = host.querySelector('a');
    expect(link?.getAttribute('aria-label')).toBe('L-101, test Fri 8 May');
    expect(link?.getAttribute('href')).toBe(`/batches/${aBatch(1).id}`);
  });

  it('is one stop of the Tab key, at the block visited last', async () => {
    const { fixture, host } = await draw([aBatch(1, { shelfId: top }), aBatch(2, { shelfId: bottom })]);
    document.body.append(host);
    const stops = () => [...host.querySelectorAll('a')].map((link) => link.getAttribute('tabindex'));
    expect(stops()).toEqual(['0', '-1']);
    host.querySelectorAll('a')[1]?.focus();
    await fixture.whenStable();
    expect(stops()).toEqual(['-1', '0']);
  });

  it('says so when no rack stands there', async () => {
    const { fixture, host } = await draw([]);
    fixture.componentRef.setInput('racks', []);
    await fixture.whenStable();
    expect(host.textContent).toContain('No rack stands here yet.');
  });
});
