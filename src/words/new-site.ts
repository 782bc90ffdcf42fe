export const newSite = {
  whichSite: 'Which site',
  where: 'Where',
  rulesAndDesign: 'Rules and design',
  shutdownAndReports: 'Shutdown and reports',
  anInitiatorAtThis:
    'An initiator at this switch and a zone for the whole site are made with it. A site with several gets the others on its as-built page.',
  somethingIsMissingOr: 'Something is missing or wrong',
  creating: 'Creating …',
  createTheSite: 'Create the site',
  backToCommissioning: 'Back to commissioning',
  atThisLongitudeThe: (replaceAll: string, round: number) =>
    `At this longitude the sun and the clock of ${replaceAll} are ${round} hours apart. Is the sign of the longitude right (west is negative), and the zone?`,
};
