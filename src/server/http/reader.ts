import { AsyncLocalStorage } from 'node:async_hooks';
import { readTemperaturesBy, type TemperatureUnit } from '../../drawings/numbers';

/** For whom a page or a paper is being made, as far as numbers are written by it. */
const reader = new AsyncLocalStorage<{ units: TemperatureUnit }>();

readTemperaturesBy(() => reader.getStore()?.units ?? 'metric');

/** Runs `work`, and all that it starts, for a reader. */
export const asReader = <T>(units: TemperatureUnit, work: () => T): T => reader.run({ units }, work);
