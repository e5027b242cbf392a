import { signal } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { Session } from '../session/session';
import { Units } from './units';

describe('the unit of temperatures', () => {
  const me = signal<{ id: string } | null>({ id: 'ines' });
  let units: Units;

  beforeEach(() => {
    localStorage.clear();
    me.set({ id: 'ines' });
    TestBed.configureTestingModule({ providers: [{ provide: Session, useValue: { me } }] });
    units = TestBed.inject(Units);
  });

  it('is the studio’s own until a person chooses', () => {
    expect([units.unitFor('C'), units.unitFor('F')]).toEqual(['C', 'F']);
    units.choose('F');
    expect([units.unitFor('C'), units.unitFor('F')]).toEqual(['F', 'F']);
    units.choose(null);
    expect(units.unitFor('C')).toBe('C');
  });

  it('is kept for each person on this device', () => {
    units.choose('F');
    me.set({ id: 'tomas' });
    expect(units.unitFor('C')).toBe('C');
    me.set({ id: 'ines' });
    expect(units.unitFor('C')).toBe('F');
  });
});
