export const statesWords = {
  passing: 'Passing',
  inShutdown: 'In shutdown',
  unheard: 'Unheard',
  silent: 'Silent',
  dark: 'Dark',
  notShuttingDown: 'Not shutting down',
  stuckInShutdown: 'Stuck in shutdown',
  unconfirmed: 'Unconfirmed',
  shutDownLate: 'Shut down late',
  flapping: 'Flapping',
  tellsNothingItself: 'Tells nothing itself',
};
