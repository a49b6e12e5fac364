import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';

/** A folder that goes again, and the openssl command in it. */
export class Openssl {
  readonly folder = mkdtempSync(path.join(tmpdir(), 'witnessmark-openssl-'));

  at = (name: string): string => path.join(this.folder, name);
  read = (name: string): Uint8Array => new Uint8Array(readFileSync(this.at(name)));
  write(name: string, content: string | Uint8Array): string {
    writeFileSync(this.at(name), content);
    return this.at(name);
  }
  run = (...parts: string[]): string =>
    execFileSync('openssl', parts, { cwd: this.folder, encoding: 'utf8', stdio: ['ignore', 'pipe', 'pipe'] });
  /** Whether openssl is content. */
  says(...parts: string[]): boolean {
    try {
      this.run(...parts);
      return true;
    } catch (error) {
      // It ran to its end and said no; anything else is no answer.
      if (typeof (error as { status?: unknown }).status !== 'number') throw error;
      return false;
    }
  }
  remove = (): void => rmSync(this.folder, { recursive: true });

  /** Whether `openssl ts -verify` takes a token over data, with a root, judged at a time. */
  takesToken(token: Uint8Array, data: string, root: Uint8Array, at = new Date()): boolean {
    const [tokenFile, dataFile] = [this.write('judged.der', token), this.write('judged.txt', data)];
    const rootFile = this.write('judged.pem', pemOf(root));
    const time = String(Math.floor(at.getTime() / 1000));
    return this.says('ts', '-verify', '-data', dataFile, '-in', tokenFile, '-token_in', '-CAfile', rootFile, '-attime', time);
  } // prettier-ignore
}

export const pemOf = (der: Uint8Array): string =>
  `-----BEGIN CERTIFICATE-----\n${Buffer.from(der)
    .toString('base64')
    .match(/.{1,64}/g)
    ?.join('\n')}\n-----END CERTIFICATE-----\n`;

const keyOptions = {
  'P-256': ['-algorithm', 'EC', '-pkeyopt', 'ec_paramgen_curve:P-256'],
  'P-384': ['-algorithm', 'EC', '-pkeyopt', 'ec_paramgen_curve:P-384'],
  'P-521': ['-algorithm', 'EC', '-pkeyopt', 'ec_paramgen_curve:P-521'],
  RSA: ['-algorithm', 'RSA', '-pkeyopt', 'rsa_keygen_bits:2048'],
} as const;
export type KeyKind = keyof typeof keyOptions;

const configuration = `[req]
distinguished_name=dn
prompt=no
[dn]
CN=unused
[root]
basicConstraints=critical,CA:TRUE
keyUsage=critical,keyCertSign,cRLSign
subjectKeyIdentifier=hash
[between]
basicConstraints=critical,CA:TRUE,pathlen:0
keyUsage=critical,keyCertSign,cRLSign
subjectKeyIdentifier=hash
authorityKeyIdentifier=keyid
[stamps]
keyUsage=critical,digitalSignature
extendedKeyUsage=critical,timeStamping
subjectKeyIdentifier=hash
authorityKeyIdentifier=keyid
[papers]
keyUsage=critical,digitalSignature
subjectKeyIdentifier=hash
[tsa]
default_tsa=authority
[authority]
serial=serial
signer_cert=stamps.pem
signer_key=stamps.key
certs=between.pem
default_policy=1.2.3.4.1
digests=sha256
accuracy=secs:1
ess_cert_id_chain=no
`;

/** Root, a certificate between, and one for time stamps, all made by openssl; names as files: root.pem, stamps.key … */
export function makeOpensslAuthority(openssl: Openssl, kind: KeyKind, signing: string[] = []): { root: Uint8Array } {
  openssl.write('openssl.cnf', configuration);
  openssl.write('serial', '4D\n');
  for (const name of ['root', 'between', 'stamps', 'papers']) {
    openssl.run('genpkey', ...keyOptions[kind], '-out', `${name}.key`);
    const subject = ['-subj', `/C=XX/O=Quill/CN=Quill ${name}`];
    if (name === 'root') {
      const self = ['-x509', '-new', '-key', 'root.key', '-days', '30', '-config', 'openssl.cnf', '-extensions', 'root'];
      openssl.run('req', ...self, ...subject, ...signing, '-sha384', '-out', 'root.pem');
      continue;
    }
    const issuer = name === 'between' ? 'root' : 'between';
    openssl.run('req', '-new', '-key', `${name}.key`, '-config', 'openssl.cnf', ...subject, '-out', `${name}.csr`);
    const by = ['-CA', `${issuer}.pem`, '-CAkey', `${issuer}.key`, '-CAcreateserial', '-days', '20', '-sha256'];
    const what = ['-extfile', 'openssl.cnf', '-extensions', name, ...signing];
    openssl.run('x509', '-req', '-in', `${name}.csr`, ...by, ...what, '-out', `${name}.pem`);
  }
  openssl.run('x509', '-in', 'root.pem', '-outform', 'DER', '-out', 'root.der');
  return { root: openssl.read('root.der') };
} // prettier-ignore

/** A token by that authority over a text, made by `openssl ts`. */
export function opensslToken(openssl: Openssl, text: string, change: { digest?: string; named?: string } = {}): Uint8Array {
  const { digest = 'sha256', named = 'sha256' } = change;
  const settings = `${configuration}signer_digest=${digest}\ness_cert_id_alg=${named}\n`;
  openssl.write('ts.cnf', settings);
  openssl.run('ts', '-query', '-data', openssl.write('data.txt', text), '-sha256', '-cert', '-out', 'query.tsq');
  openssl.run('ts', '-reply', '-config', 'ts.cnf', '-queryfile', 'query.tsq', '-token_out', '-out', 'token.der');
  return openssl.read('token.der');
} // prettier-ignore
