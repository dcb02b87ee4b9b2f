import { execFile } from 'node:child_process';
import { readFile, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { promisify } from 'node:util';

const openssl = promisify(execFile);
const KEY = ['-newkey', 'ec', '-pkeyopt', 'ec_paramgen_curve:prime256v1', '-nodes', '-days', '1'];

export interface Authority {
  /** PEM, also in `authority.pem` of the folder. */
  certificate: string;
  /** Key and certificate of a server at 127.0.0.1. */
  server: { key: string; cert: string };
}

/** A certificate authority of this test alone, and a certificate that it signed for 127.0.0.1. Needs openssl. */
export async function makeAuthority(folder: string): Promise<Authority> {
  const at = (name: string) => join(folder, name);
  const make = (...args: string[]) => openssl('openssl', ['req', ...KEY, ...args]);
  await make(
    '-x509',
    '-subj',
    '/CN=Test authority',
    '-keyout',
    at('authority.key'),
    '-out',
    at('authority.pem'),
  );
  await make('-subj', '/CN=server', '-keyout', at('server.key'), '-out', at('server.csr'));
  await writeFile(at('server.ext'), 'subjectAltName=IP:127.0.0.1\n');
  await openssl('openssl', [
    ...['x509', '-req', '-days', '1', '-in', at('server.csr'), '-extfile', at('server.ext')],
    ...[
      '-CA',
      at('authority.pem'),
      '-CAkey',
      at('authority.key'),
      '-CAcreateserial',
      '-out',
      at('server.pem'),
    ],
  ]);
  return {
    certificate: await readFile(at('authority.pem'), 'utf8'),
    server: { key: await readFile(at('server.key'), 'utf8'), cert: await readFile(at('server.pem'), 'utf8') },
  };
}
