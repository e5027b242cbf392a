import { computed, inject, Injectable, signal } from '@angular/core';
import type { alertRoutes, Rule } from '#shared/contract/alerts';
import type { peopleRoutes, Person } from '#shared/contract/people';
import type { Room, RoomMeasures, roomRoutes, RoomSeries } from '#shared/contract/rooms';
import type { Sensor, sensorRoutes } from '#shared/contract/sensors';
import { Api } from '../../core/api/api';
import { Loadable } from '../../core/api/loadable';
import { Session } from '../../core/session/session';
import { StudioClock } from '../../core/time/studio-clock';
import { type Period, span } from './period';

/** What the page of one room shows beside its live state. */
@Injectable()
export class RoomStore {
  private readonly api = inject(Api);
  private readonly session = inject(Session);
  private readonly clock = inject(StudioClock);
  private readonly writablePeriod = signal<Period>({ kind: '24h' });
  private readonly writableShown = signal({ from: 0, to: 0 });
  private readonly loadedSeries = new Loadable<RoomSeries>();
  private readonly loadedMeasures = new Loadable<RoomMeasures>();
  private readonly loadedSensors = new Loadable<readonly Sensor[]>();
  private readonly loadedRules = new Loadable<readonly Rule[]>();
  private readonly loadedRooms = new Loadable<readonly Room[]>();
  private readonly loadedPeople = new Loadable<readonly Person[]>();
  private readonly place = signal<{ readonly studioId: string; readonly roomId: string } | null>(null);

  readonly period = this.writablePeriod.asReadonly();
  /** Ends of the period as last loaded, epoch ms. */
  readonly shown = this.writableShown.asReadonly();
  readonly series = this.loadedSeries.value;
  readonly seriesFault = this.loadedSeries.fault;
  readonly seriesLoading = this.loadedSeries.loading;
  readonly measures = this.loadedMeasures.value;
  readonly measuresFault = this.loadedMeasures.fault;
  readonly rules = this.loadedRules.value;
  readonly people = this.loadedPeople.value;
  readonly sensorsFault = this.loadedSensors.fault;
  /** Sensors of this room, those in use first. */
  readonly sensors = computed(() =>
    this.loadedSensors
      .value()
      ?.filter((sensor) => sensor.roomId === this.place()?.roomId)
      .sort((a, b) => Number(a.retired) - Number(b.retired) || a.name.localeCompare(b.name)),
  );
  readonly notes = computed(
    () => this.loadedRooms.value()?.find((room) => room.id === this.place()?.roomId)?.notes ?? '',
  );

  /** Shows a room; what another room showed is forgotten. */
  open(studioId: string, roomId: string): void {
    this.place.set({ studioId, roomId });
    this.loadedSeries.clear();
    this.loadedMeasures.clear();
    this.loadedRules.clear();
    this.loadPeriod();
    const params = { studioId };
    void this.loadedRooms.load(() =>
      this.api.call<typeof roomRoutes.list>('GET', '/api/studios/:studioId/rooms', { params }),
    );
    if (this.session.may('sensors.read', studioId)) this.loadSensors();
    if (this.session.may('rules.read', studioId)) {
      void this.loadedRules.load(() =>
        this.api.call<typeof alertRoutes.rules>('GET', '/api/studios/:studioId/rooms/:roomId/rules', {
          params: { studioId, roomId },
        }),
      );
    }
    if (this.session.mayAnywhere('people.read')) {
      void this.loadedPeople.load(() => this.api.call<typeof peopleRoutes.list>('GET', '/api/people'));
    }
  }

  choose(period: Period): void {
    this.writablePeriod.set(period);
    this.loadPeriod();
  }

  /** Loads series and measures of the period anew; one that ends now moves on. */
  loadPeriod(): void {
    const place = this.place();
    if (!place) return;
    const { from, to } = span(this.writablePeriod(), this.clock.now());
    this.writableShown.set({ from, to });
    const query = { from: new Date(from).toISOString(), to: new Date(to).toISOString() };
    void this.loadedSeries.load(() =>
      this.api.call<typeof roomRoutes.series>('GET', '/api/studios/:studioId/rooms/:roomId/series', {
        params: place,
        query,
      }),
    );
    void this.loadedMeasures.load(() =>
      this.api.call<typeof roomRoutes.measures>('GET', '/api/studios/:studioId/rooms/:roomId/measures', {
        params: place,
        query,
      }),
    );
  }

  loadSensors(): void {
    const place = this.place();
    if (!place) return;
    void this.loadedSensors.load(() =>
      this.api.call<typeof sensorRoutes.list>('GET', '/api/studios/:studioId/sensors', {
        params: { studioId: place.studioId },
      }),
    );
  }
}
