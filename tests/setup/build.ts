import { buildIfStale } from '../../src/server/up/build.mjs';

/** Browser journeys and the access matrix run against the built site. */
export default async function setup(): Promise<void> {
  await buildIfStale();
}
