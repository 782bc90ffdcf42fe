import fs from 'node:fs';
import { createServer as createHttpsServer, type Server as HttpsServer } from 'node:https';
import type { RequestListener } from 'node:http';
import { createSecureContext } from 'node:tls';
import type { Config } from './config';
import { log } from './log';

/** The site's own HTTPS: certificate and key from two files, read again when they change. */

export interface Certificate {
  cert: Buffer;
  key: Buffer;
}
export type CertificateFiles = Required<Pick<Config, 'TLS_CERT' | 'TLS_KEY'>>;
/** Certificate programs write two files one after the other: looked at this often, taken when both fit. */
const LOOK_MS = 5000;

/** @throws Error that names the file and what is wrong with it */
export function readCertificate({ TLS_CERT, TLS_KEY }: CertificateFiles): Certificate {
  const read = (name: string, file: string): Buffer => {
    try {
      return fs.readFileSync(file);
    } catch (error) {
      throw new Error(
        `${name} is "${file}", which cannot be read: ${error instanceof Error ? error.message : 'no reason given'}`,
        { cause: error },
      );
    }
  };
  const certificate = { cert: read('TLS_CERT', TLS_CERT), key: read('TLS_KEY', TLS_KEY) };
  try {
    createSecureContext(certificate);
  } catch (error) {
    throw new Error(
      `TLS_CERT ("${TLS_CERT}") and TLS_KEY ("${TLS_KEY}") are no certificate and its key, both as PEM: ${error instanceof Error ? error.message : 'no reason given'}`,
      { cause: error },
    );
  }
  return certificate;
}

export interface SecureServer {
  server: HttpsServer;
  /** Takes the files as they are now; keeps what it has where they are at fault. Open connections go on. */
  reload(): void;
  /** Looks at the files no longer. */
  forget(): void;
}

/** A server with its certificate, which follows its files. @throws Error as `readCertificate` */
export function secureServer(files: CertificateFiles, listener: RequestListener): SecureServer {
  const server = createHttpsServer({ ...readCertificate(files), minVersion: 'TLSv1.2' }, listener);
  const reload = (): void => {
    try {
      server.setSecureContext({ ...readCertificate(files), minVersion: 'TLSv1.2' });
      log.info({ file: files.TLS_CERT }, 'the certificate has been read again');
    } catch (error) {
      log.error({ error }, 'the new certificate is at fault; the one before stays in use');
    }
  };
  const names = [files.TLS_CERT, files.TLS_KEY];
  // by its times, not by events: these are lost where the file is a link that is pointed elsewhere
  for (const name of names) fs.watchFile(name, { interval: LOOK_MS, persistent: false }, reload);
  return { server, reload, forget: () => names.forEach((name) => fs.unwatchFile(name, reload)) };
}

/** The two files, where the site speaks HTTPS itself. */
export const certificateFiles = ({ TLS_CERT, TLS_KEY }: Config): CertificateFiles | null =>
  TLS_CERT !== undefined && TLS_KEY !== undefined ? { TLS_CERT, TLS_KEY } : null;
