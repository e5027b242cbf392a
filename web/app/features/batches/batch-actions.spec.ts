import { signal } from '@angular/core';
import { type ComponentFixture, TestBed } from '@angular/core/testing';
import { beforeEach, describe, expect, it } from 'vitest';
import type { BatchPage } from '#shared/contract/batches';
import { aBatch } from '#shared/words/test-floor';
import { ApiError } from '../../core/api/api-error';
import { Session } from '../../core/session/session';
import { BatchActions } from './batch-actions';
import { BatchStore } from './batch-store';

const page = (version: number, roomName: string): BatchPage => ({
  ...{ card: aBatch(1, { version }), recipe: null, notes: '', estimate: null, shifts: [], verdicts: [] },
  stays: [
    {
      ...{ id: roomName, shelfId: 'sh', roomId: 'r', roomName, rackName: 'Rack 1', shelfPosition: 2 },
      ...{ from: '2026-05-01T10:00:00.000Z', to: null },
    },
  ],
});
const CHANGED = new ApiError(409, {
  ...{ type: 'about:blank', title: '', status: 409, code: 'changed-meanwhile', detail: 'Load it again.' },
});

describe('what can be done with a batch', () => {
  const current = signal(page(2, 'Loft'));
  const sent: { version: number; reason?: string }[] = [];
  let refusal: ApiError | null;
  let fixture: ComponentFixture<BatchActions>;
  let host: HTMLElement;

  const press = async (name: RegExp) => {
    const buttons = [...host.querySelectorAll('button')].filter((button) =>
      name.test(button.textContent.trim()),
    );
    buttons.at(-1)?.click();
    await fixture.whenStable();
  };
  const write = async (text: string) => {
    const field = host.querySelector('textarea')!;
    field.value = text;
    field.dispatchEvent(new Event('input'));
    await fixture.whenStable();
  };

  beforeEach(async () => {
    current.set(page(2, 'Loft'));
    sent.length = 0;
    refusal = null;
    const store = {
      studio: () => null,
      page: { value: current },
      load: () => {
        current.set(page(3, 'Cellar'));
        fixture.componentRef.setInput('batch', current());
        return Promise.resolve();
      },
      end: (body: { version: number; reason?: string }) => {
        sent.push(body);
        return refusal ? Promise.reject(refusal) : Promise.resolve();
      },
    };
    TestBed.configureTestingModule({
      providers: [
        { provide: BatchStore, useValue: store },
        { provide: Session, useValue: { may: () => true, me: signal(null) } },
      ],
    });
    fixture = TestBed.createComponent(BatchActions);
    fixture.componentRef.setInput('batch', current());
    await fixture.whenStable();
    host = fixture.nativeElement as HTMLElement;
  });

  it('asks for a reason before anything that cannot be taken back', async () => {
    await press(/^Scrap$/);
    await press(/^Scrap$/);
    expect(sent).toEqual([]);
    await write('dropped');
    await press(/^Scrap$/);
    expect(sent).toEqual([{ version: 2, as: 'scrapped', reason: 'dropped' }]);
    expect(host.querySelector('textarea')).toBeNull();
  });

  it('overwrites nothing: it says what somebody else did, keeps what was written, and lets the person choose', async () => {
    await press(/^Scrap$/);
    await write('dropped');
    refusal = CHANGED;
    await press(/^Scrap$/);
    expect(host.querySelector('[role=alert]')?.textContent).toMatch(
      /it was moved from Loft, Rack 1, shelf 2 to Cellar, Rack 1, shelf 2/,
    );
    expect(host.querySelector('textarea')?.value).toBe('dropped');
    refusal = null;
    await press(/^Scrap it all the same$/);
    expect(sent.map(({ version }) => version)).toEqual([2, 3]);
  });

  it('sends what the person saw, even when a newer batch has come in meanwhile', async () => {
    await press(/^Scrap$/);
    await write('dropped');
    fixture.componentRef.setInput('batch', page(7, 'Cellar'));
    await press(/^Scrap$/);
    expect(sent.map(({ version }) => version)).toEqual([2]);
  });

  it('says any other refusal as a sentence and leaves the form open', async () => {
    await press(/^Scrap$/);
    await write('dropped');
    refusal = new ApiError(0, null);
    await press(/^Scrap$/);
    expect(host.querySelector('.fault')?.textContent).toMatch(/gateway cannot be reached/);
    expect(host.querySelector('textarea')?.value).toBe('dropped');
  });
});
