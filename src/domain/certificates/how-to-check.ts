/**
 * How anybody checks a certificate without this program, as the public page and the README print it; the tests run these
 * very lines. `certificate.pdf` is the certificate, `key.pem` the public key that the works publishes.
 *
 * The attached file is canonical JSON (RFC 8785) as a whole, and `statement` is its last member: the text after that
 * name, up to the last brace, is what was signed. A quotation mark within a text is escaped, so the name is found once.
 */
export const SHELL_CHECK = [
  'pdfdetach -save 1 -o certificate.json certificate.pdf',
  String.raw`sed 's/^.*"statement"://; s/}$//' certificate.json | tr -d '\n' > statement.json`,
  String.raw`sed -n 's/^.*"value":"\([^"]*\)".*$/\1/p' certificate.json | base64 -d > signature.bin`,
  'openssl pkeyutl -verify -pubin -inkey key.pem -rawin -in statement.json -sigfile signature.bin',
] as const;

/** The same in JavaScript, which writes the canonical JSON anew: what has to be done in any language. */
export const SCRIPT_CHECK = [
  `import { createPublicKey, verify } from 'node:crypto';`,
  `import { readFileSync } from 'node:fs';`,
  ``,
  `const { statement, signature } = JSON.parse(readFileSync('certificate.json', 'utf8'));`,
  `const canonical = (value) =>`,
  `  value === null || typeof value !== 'object'`,
  `    ? JSON.stringify(value)`,
  `    : Array.isArray(value)`,
  '      ? `[${value.map(canonical).join()}]`',
  `      : \`{\${Object.keys(value)`,
  `          .sort()`,
  '          .map((name) => `${JSON.stringify(name)}:${canonical(value[name])}`)',
  '          .join()}}`;',
  `const key = createPublicKey(readFileSync('key.pem'));`,
  `console.log(verify(null, Buffer.from(canonical(statement)), key, Buffer.from(signature.value, 'base64')));`,
] as const;
