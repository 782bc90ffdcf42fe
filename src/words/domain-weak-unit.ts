import type { WeakUnit } from '../domain/output/weak-unit';
import { isOne } from './language';

/** What is said of a unit that gives less than its neighbours; a clause that begins with a capital. */
export const weakUnitSaid = {
  source: '3.5 robust standard deviations (Iglewicz & Hoaglin 1993), at least 6 %',
  partOfDay: (position: number) => `Unit ${position} is low for part of the day`,
  held: (position: number) => `Unit ${position} passes nothing of its module's voltage`,
  /** @param count sub-strings bypassed, of the `groups` of its module */
  bypassed: (position: number, count: number, groups: number) =>
    `Unit ${position} gives ${groups - count} of ${groups} parts of its module's voltage: ${isOne(count) ? 'one sub-string of cells is' : `${count} sub-strings of cells are`} bypassed`,
  low: (position: number, share: number) =>
    `Unit ${position} gives ${Math.round(100 * share)} % less than its neighbours`,
};

export const weakUnitCouldBe: Record<WeakUnit['kind'], readonly string[]> = {
  part_of_day: ['shade from something near', 'a contact that comes and goes'],
  held: ['in shutdown while released', 'its module is not mated', 'its module is dead or covered'],
  bypassed_substring: ['a failed bypass diode', 'cracked cells', 'shade on one row of cells all day'],
  low: ['dirt or shade on its module', 'a module of another type', 'its measurement is off'],
};
