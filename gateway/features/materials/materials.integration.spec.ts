import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { materialRoutes } from '#shared/contract/materials';
import { cellOf } from '#shared/cure/grid';
import type { Actor } from '../../http/actor.js';
import type { ProblemError } from '../../http/problem-error.js';
import { DAY, NOON, TestFloor } from '../estimates/test-floor.js';
import { Materials } from './materials.js';
import { MaterialsRepository } from './materials-repository.js';

const codeOf = (attempt: Promise<unknown>) =>
  attempt.then(
    () => 'done',
    (error: ProblemError) => error.code,
  );

describe('materials on a real database', () => {
  let floor: TestFloor;
  let materials: Materials;
  let lead: Actor;

  beforeAll(async () => {
    floor = await TestFloor.open();
    materials = new Materials(
      new MaterialsRepository(floor.database.dataSource),
      floor.clock,
      async (waxId) => void (await floor.estimates.madeOfTouched({ waxId })),
    );
    lead = await floor.actor();
  });
  afterAll(() => floor.close());

  it('starts a wax from its family, says it is a guess, and makes estimates anew when its numbers change', async () => {
    const wax = await materials.createWax({ name: 'Meadow soy', family: 'soy-container' }, lead);
    expect(wax.provenance).toContain('Starting guess');
    expect(wax).toMatchObject({ kinetics: { testDays: 14, frostingFrom: 25 }, pourLow: 55, pourHigh: 65 });
    expect(materialRoutes.waxes.reply.parse(await materials.waxes())).toContainEqual(wax);
    const fragrance = await materials.createFragrance(
      { name: 'Fig leaf', flashPoint: 93, certificateMaxLoad: 9.5 },
      lead,
    );
    const design = await materials.createDesign(
      {
        name: 'Fig 220',
        waxId: wax.id,
        fragranceId: fragrance.id,
        loadPercentOfWax: 8,
        wick: 'CD 14',
        vessel: 'Amber jar',
        vesselDiameterMm: 75,
        fillGrams: 220,
      },
      lead,
    );
    expect(design.lastTest).toBeNull();
    const room = await floor.addRoom();
    await floor.record(await floor.addSensor(room), cellOf(NOON - 9 * DAY), cellOf(NOON), () => 21);
    const id = await floor.addBatch(design.id, NOON - 5 * DAY, [{ room, from: NOON - 5 * DAY, to: null }]);
    await floor.estimates.batchesTouched(floor.studioId, [id]);
    const before = floor.estimates.cards([id], false)[0];
    const announced: string[] = [];
    const stop = floor.batchesChanged.listen(({ batchIds }) => announced.push(...batchIds));
    const changed = await materials.changeWax(
      wax.id,
      {
        name: wax.name,
        kinetics: { ...wax.kinetics, testDays: 10, calibration: { cvD: 0.08, sdEnergy: 6 } },
        provenance: 'Needle readings, two batches, spring',
        version: 1,
      },
      lead,
    );
    stop();
    expect(changed.version).toBe(2);
    expect(announced).toEqual([id]);
    const after = floor.estimates.cards([id], false)[0];
    expect(after?.hardening).toBeGreaterThan(before?.hardening ?? 1);
    const page = await floor.estimates.page(floor.studioId, id, null, false);
    expect(page?.estimate?.numbers).toMatchObject({
      calibrated: true,
      cvD: 0.08,
      testDays: 10,
      provenance: 'Needle readings, two batches, spring',
    });
    const old = { name: wax.name, kinetics: wax.kinetics, provenance: 'back again', version: 1 };
    expect(await codeOf(materials.changeWax(wax.id, old, lead))).toBe('changed-meanwhile');
    const upsideDown = { ...old, version: 2, kinetics: { ...wax.kinetics, capC: 40, softC: 38 } };
    expect(await codeOf(materials.changeWax(wax.id, upsideDown, lead))).toBe('bad-input');
    expect(await codeOf(materials.changeWax(randomUUID(), old, lead))).toBe('not-found');
  });

  it('carries the latest test of a design, and takes only materials that exist', async () => {
    const tested = await floor.addDesign('rapeseed');
    const found = (await materials.designs()).find(({ id }) => id === tested.id);
    expect(found?.lastTest).toMatchObject({ passed: true });
    expect(found?.lastTest?.batchCode).toMatch(/^T-/);
    const fields = {
      name: 'Nothing',
      waxId: randomUUID(),
      fragranceId: null,
      loadPercentOfWax: 0,
      wick: 'CD 8',
      vessel: 'Tin',
      vesselDiameterMm: 60,
      fillGrams: 120,
    };
    expect(await codeOf(materials.createDesign(fields, lead))).toBe('bad-input');
    const onWax = { ...fields, waxId: tested.waxId };
    expect(await codeOf(materials.createDesign({ ...onWax, fragranceId: randomUUID() }, lead))).toBe(
      'bad-input',
    );
    expect(await codeOf(materials.createDesign({ ...onWax, loadPercentOfWax: 6 }, lead))).toBe('bad-input');
    const plain = await materials.createDesign(onWax, lead);
    expect(materialRoutes.designs.reply.parse(await materials.designs())).toContainEqual(plain);
  });
});
