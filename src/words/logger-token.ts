export const tokenShown = {
  putItIntoThe:
    ' Put it into the logger now, or keep it where secrets are kept. If it is lost, make a new one.',
  shownOnce: 'It is shown this once.',
  token: 'Token',
  reportsTo: 'The logger reports to',
  orByHttps: 'or, where it has no WebSocket, in batches to',
  copied: 'Copied',
  copyTheToken: 'Copy the token',
  iHaveIt: 'I have it',
};
