import { readingAround, type ReadSite } from './around';
import { judgeReading, type JudgedReading, type TakenReading } from './judge-reading';

/**
 * A kept reading judged again with what stands around it by now: the other readings to earth, strings measured after
 * it. What had answered the roll call when it was taken is what counts, not who has answered since.
 * @throws RangeError when the site does not hold the string or its types
 */
export function judgedNow(
  sheet: ReadSite,
  stringId: string,
  reading: TakenReading & { finding?: { heard: number } | null },
): JudgedReading {
  const around = readingAround(sheet, stringId, reading);
  return judgeReading(reading, { ...around, heard: reading.finding?.heard ?? around.heard });
}
