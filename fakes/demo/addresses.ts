/** Where everything answers on one machine; 127.0.0.1 always. */
export interface Addresses {
  appPort: number
  storagePort: number
  paymentsPort: number
  inboxPort: number
  smtpPort: number
}

/** `PORT` moves the app and `FAKES_PORT` the stand-ins, so that several can run side by side. */
export function readAddresses(environment: Record<string, string | undefined>): Addresses {
  return addressesFrom(readPort(environment.PORT, 3000), readPort(environment.FAKES_PORT, 3101))
}

export function addressesFrom(appPort: number, fakesPort: number): Addresses {
  return { appPort, storagePort: fakesPort, paymentsPort: fakesPort + 1, inboxPort: fakesPort + 2, smtpPort: fakesPort + 24 }
}

export function localAddress(port: number): string {
  return `http://127.0.0.1:${port}`
}

function readPort(text: string | undefined, otherwise: number): number {
  const port = Number(text)
  return Number.isInteger(port) && port > 0 && port < 65536 ? port : otherwise
}
