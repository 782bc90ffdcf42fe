import { execFileSync } from 'node:child_process';
import fs from 'node:fs';
import https from 'node:https';
import path from 'node:path';
import type { PeerCertificate, TLSSocket } from 'node:tls';

export interface SelfSigned {
  cert: string;
  key: string;
}

/** A certificate for 127.0.0.1 that signs itself, and its key, made by openssl into `folder`. */
export function selfSigned(folder: string, name: string): SelfSigned {
  const files = { cert: path.join(folder, `${name}.pem`), key: path.join(folder, `${name}.key`) };
  execFileSync(
    'openssl',
    [
      ...['req', '-x509', '-newkey', 'rsa:2048', '-nodes', '-days', '2', '-subj', `/CN=${name}`],
      ...['-addext', 'subjectAltName=DNS:localhost,IP:127.0.0.1', '-keyout', files.key, '-out', files.cert],
    ],
    { stdio: 'pipe' },
  );
  return files;
}

export interface SecureAnswer {
  status: number;
  headers: Record<string, string | string[] | undefined>;
  body: string;
  /** Common name of the certificate that the server showed. */
  shownBy: string;
}

/** One request on a connection of its own, trusting `ca` and nobody else. */
export function askSecurely(
  url: string,
  ca: string,
  {
    method = 'GET',
    headers = {},
    body,
  }: { method?: string; headers?: Record<string, string>; body?: string | Buffer } = {},
): Promise<SecureAnswer> {
  return new Promise((resolve, reject) => {
    const request = https.request(
      url,
      { method, ca: fs.readFileSync(ca), agent: false, headers },
      (response) => {
        const certificate: PeerCertificate = (response.socket as TLSSocket).getPeerCertificate();
        const chunks: Buffer[] = [];
        response.on('data', (chunk: Buffer) => chunks.push(chunk));
        response.on('end', () =>
          resolve({
            status: response.statusCode ?? 0,
            headers: response.headers,
            body: Buffer.concat(chunks).toString('utf8'),
            shownBy: String(certificate.subject.CN),
          }),
        );
      },
    );
    request.on('error', reject);
    request.end(body);
  });
}
