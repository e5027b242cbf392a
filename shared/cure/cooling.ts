/** Cooling after the pour, lumped capacitance: a rough guide that drives no gate. */

/** Biot number h·L_c/k; below 0.1 the lumped model holds, above it gives a lower bound. */
export function biot(filmCoefficient: number, characteristicLength: number, conductivity: number): number {
  return (filmCoefficient * characteristicLength) / conductivity;
}

/** Time constant ρ·c·L_c/h in s (density kg/m³, heat capacity J/(kg·K), length m, film coefficient W/(m²·K)). */
export function coolingTimeConstant(
  density: number,
  heatCapacity: number,
  characteristicLength: number,
  filmCoefficient: number,
): number {
  return (density * heatCapacity * characteristicLength) / filmCoefficient;
}

/** Time in s for a lumped body to go from one temperature to another in surroundings at a third. */
export function lumpedTime(timeConstant: number, start: number, end: number, around: number): number {
  return timeConstant * Math.log((start - around) / (end - around));
}

export interface CoolingWax {
  /** kg/m³ */
  readonly density: number;
  /** J/(kg·K) */
  readonly solidHeatCapacity: number;
  readonly liquidHeatCapacity: number;
  /** J/kg */
  readonly latentHeat: number;
  /** °C */
  readonly congealsAt: number;
}

/** Hours from the pour until the wax is within `endDifference` K of the room: liquid, latent plateau, solid. */
export function coolingHours(
  wax: CoolingWax,
  characteristicLength: number,
  filmCoefficient: number,
  pour: number,
  room: number,
  endDifference: number,
): { liquid: number; plateau: number; solid: number; total: number } {
  const constant = (heatCapacity: number) =>
    coolingTimeConstant(wax.density, heatCapacity, characteristicLength, filmCoefficient);
  const liquid = lumpedTime(constant(wax.liquidHeatCapacity), pour, wax.congealsAt, room) / 3600;
  const plateau =
    (wax.density * wax.latentHeat * characteristicLength) /
    (filmCoefficient * (wax.congealsAt - room)) /
    3600;
  const solid =
    lumpedTime(constant(wax.solidHeatCapacity), wax.congealsAt, room + endDifference, room) / 3600;
  return { liquid, plateau, solid, total: liquid + plateau + solid };
}
