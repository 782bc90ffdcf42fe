export const sharedCommissioningSteps = {
  asBuilt: 'As-built',
  installChecks: 'Install checks',
  meterReadings: 'Meter readings',
  rollCall: 'Roll call',
  shutdownTest: 'Shutdown test',
  handover: 'Handover',
  done: 'done',
  underWay: 'under way',
  notStarted: 'not started',
  stepsOfCommissioning: 'Steps of commissioning',
};
