/** Stands with every result of an event set. */
export const OPEN_SEA =
  'Event sets ignore land: every wind is that over open sea, and storms do not decay over land. Over land they are too high.';
