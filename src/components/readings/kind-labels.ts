import { sharedReadingsKinds } from '../../words/shared-readings';

/** The kinds of unit as a person on a roof calls them. */
export const KIND_LABELS = {
  shutdown_only: sharedReadingsKinds.shutdownOnly,
  monitored: sharedReadingsKinds.monitored,
  optimizing: sharedReadingsKinds.optimizing,
} as const;
