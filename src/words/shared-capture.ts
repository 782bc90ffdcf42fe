export const openOnPhone = {
  readingsAndChecksOn: 'Readings and checks on a phone',
  showTheCode: 'Show the code',
  codeOfTheAddress: (address: string) => `Code of the address ${address}`,
  scanItOnceWhere: (siteName: string) =>
    `Scan it once where there is a network: from then on the page of ${siteName} opens on that phone without one, and what is recorded is sent when the network returns.`,
  thisSiteIsReached:
    'This site is reached by plain HTTP: phones then open no camera for it and keep no page. Give it a certificate (TLS_CERT) or a proxy that speaks HTTPS.',
  openOnThisDevice: 'Open on this device',
};
