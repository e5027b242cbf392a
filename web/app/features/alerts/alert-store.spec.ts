import { TestBed } from '@angular/core/testing';
import { beforeEach, describe, expect, it } from 'vitest';
import { Api } from '../../core/api/api';
import { ApiError } from '../../core/api/api-error';
import { LiveStore } from '../../core/live/live-store';
import { Session } from '../../core/session/session';
import { AlertStore, type AlertStory } from './alert-store';

const story = (studioId: string) => ({ alert: { id: 'a', studioId }, steps: [] }) as unknown as AlertStory;

describe('one alert', () => {
  const calls: string[] = [];
  /** Studio that holds the alert; null: none does. */
  let home: string | null;
  let store: AlertStore;

  beforeEach(() => {
    calls.length = 0;
    home = 's2';
    const studio = (id: string) => ({ id, alerts: () => [] });
    const call = (method: string, path: string, { params }: { params: { studioId: string } }) => {
      calls.push(`${method} ${path.split('/').at(-1)} ${params.studioId}`);
      return params.studioId === home
        ? Promise.resolve(story(params.studioId))
        : Promise.reject(new ApiError(404, null));
    };
    TestBed.configureTestingModule({
      providers: [
        AlertStore,
        { provide: Api, useValue: { call } },
        { provide: LiveStore, useValue: { studios: () => ['s1', 's2', 's3'].map(studio) } },
        { provide: Session, useValue: { may: (_: string, id: string) => id !== 's3' } },
      ],
    });
    store = TestBed.inject(AlertStore);
  });

  it('is asked for where the link says', async () => {
    await store.load('a', 's2');
    expect(calls).toEqual(['GET :alertId s2']);
    expect(store.studio()?.id).toBe('s2');
  });

  it('is looked for studio by studio without a link, only where the person may see alerts', async () => {
    await store.load('a', undefined);
    expect(calls).toEqual(['GET :alertId s1', 'GET :alertId s2']);
    home = null;
    calls.length = 0;
    await store.load('a', 's1');
    expect(calls).toEqual(['GET :alertId s1', 'GET :alertId s2']);
    expect(store.story.fault()).toMatch(/not here any more/);
  });

  it('is told anew after a change, with its steps', async () => {
    await store.load('a', 's2');
    await store.acknowledge('on my way');
    expect(calls.slice(1)).toEqual(['POST acknowledge s2', 'GET :alertId s2']);
  });
});
