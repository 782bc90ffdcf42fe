import type { Note } from './note';
import { CONDUCT_NOTES } from './notes-conduct';
import { OUTPUT_NOTES } from './notes-output';

/** Every judgement's note, in the order of the page. */
export const NOTES: readonly Note[] = [...CONDUCT_NOTES, ...OUTPUT_NOTES];
