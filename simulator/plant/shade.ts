import { ofKind } from '../faults/book';
import type { Fault } from '../faults/kinds';
import type { SkyNow } from '../weather/sky';
import type { ObstaclePlan } from './plan';
import type { StringPlant } from './string-plant';

/** Metres about an obstacle's shadow in which it is half a shadow. */
const BLUR = 0.5;

/**
 * Marks the groups of cells that an obstacle's shadow, or a shade that somebody put up, falls on.
 *
 * @param beamShare share of the plane's light that is beam, which is what a shadow takes away
 * @param solarHour 0 … 24
 */
export function setShade(
  s: StringPlant,
  now: SkyNow,
  obstacles: readonly ObstaclePlan[],
  faults: readonly Fault[],
  beamShare: number,
  solarHour: number,
): void {
  const shades = ofKind(faults, 'shade').filter(
    (f) => f.string === s.plan.name && solarHour >= f.fromHour && solarHour < f.toHour,
  );
  const none = shades.length === 0 && obstacles.length === 0;
  if (none && s.shadedGroups.every((g) => g === 0)) return;
  s.shadedGroups.fill(0);
  s.shadeLoss.fill(0);
  if (now.elevation <= 1) return;
  const groups = s.moduleType.bypassGroups;
  for (const o of obstacles) castShadow(s, now, o, beamShare, groups);
  for (const f of shades)
    for (const position of f.positions) {
      if (position > s.size) continue;
      s.shadedGroups[position - 1] = groups;
      s.shadeLoss[position - 1] = f.share * beamShare;
    }
}

function castShadow(s: StringPlant, now: SkyNow, o: ObstaclePlan, beamShare: number, groups: number): void {
  const length = Math.min(40, o.height / Math.tan((now.elevation * Math.PI) / 180));
  const away = ((now.azimuth + 180) * Math.PI) / 180;
  const dx = Math.sin(away);
  const dy = Math.cos(away);
  s.plan.slots.forEach((slot, i) => {
    const x = slot.roofX - o.x;
    const y = slot.roofY - o.y;
    const along = Math.max(0, Math.min(length, x * dx + y * dy));
    const distance = Math.hypot(x - along * dx, y - along * dy);
    const cover = (o.radius + BLUR - distance) / (2 * BLUR);
    if (cover <= 0) return;
    s.shadedGroups[i] = Math.max(s.shadedGroups[i] ?? 0, Math.ceil(Math.min(1, cover) * groups));
    s.shadeLoss[i] = Math.max(s.shadeLoss[i] ?? 0, 0.92 * beamShare);
  });
}
