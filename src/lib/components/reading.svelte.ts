/** How a person reads results: at what temperature and in which unit. One for a page, shared by all its sections. */
import { createContext } from 'svelte';
import type { EnergyUnit } from '$lib/domain/energy-units';

export class Reading {
  /** K */
  temperature = $state(298.15);
  unit = $state<EnergyUnit>('kcal/mol');

  constructor(temperature = 298.15, unit: EnergyUnit = 'kcal/mol') {
    this.temperature = temperature;
    this.unit = unit;
  }
}

export const [getReading, setReading] = createContext<Reading>();
