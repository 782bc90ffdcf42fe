import type { RoofPlan } from '../schemas/api/roof';

/** What the roof plan has to say. */
export function roofFinding(
  plan: RoofPlan,
  placed: number,
  hasOutline: boolean,
): { heading: string; sentence: string } {
  const all = plan.strings.length;
  if (!hasOutline)
    return {
      heading: `The roof of ${plan.site.name} has no outline yet`,
      sentence: 'Draw its corners in metres, then lay the strings on it row by row.',
    };
  if (all === 0)
    return {
      heading: `The roof of ${plan.site.name} is drawn`,
      sentence: 'Strings come from a file or from the as-built page; then they are laid here.',
    };
  if (placed === all)
    return {
      heading: `All ${all} strings are on the roof`,
      sentence: 'A person who looks for a position finds it by this plan and its words.',
    };
  return {
    heading: `${placed} of ${all} strings are on the roof`,
    sentence:
      'Choose a string, say where it starts and how it runs; the words for each position are made from it.',
  };
}
