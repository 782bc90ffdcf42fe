/** "South roof" → "south roof", in the middle of a sentence; "PV2" stays. */
export const planeWithin = (name: string): string =>
  /^[A-Z][a-z]/.test(name) ? name.charAt(0).toLowerCase() + name.slice(1) : name;
