/** What a layer of ours may import of the others; `types:` allows type-only imports. */
export interface Layer {
  name: string;
  /** Paths in `src/` without their extension; the first layer that matches is a file's own. */
  matches: RegExp;
  imports: readonly string[];
  /** Packages it may import; undefined for any. */
  packages?: RegExp;
}

const server = [
  'env',
  'log',
  'errors',
  'domain',
  'lib',
  'schemas',
  'db',
  'write',
  'queries',
  'services',
  'documents',
  'pdf',
  'mail',
  'jobs',
  'auth',
  'payments',
  'files',
  'keys',
  'door',
  'rules',
  'run',
];
const forPages = [
  'layouts',
  'components',
  'schemas',
  'domain',
  'queries',
  'auth',
  'door',
  'errors',
  'keys',
  'lib',
  'styles',
];

/** Who imports whom, from the inside out. */
export const layers: readonly Layer[] = [
  { name: 'lib', matches: /^lib\//, imports: [] },
  { name: 'domain', matches: /^domain\//, imports: ['lib'] },
  { name: 'schemas', matches: /^schemas\//, imports: ['domain', 'lib'], packages: /^zod$/ },
  { name: 'styles', matches: /^styles\//, imports: [] },
  {
    name: 'components',
    matches: /^components\//,
    imports: ['schemas', 'domain', 'lib', 'styles', 'types:queries', 'types:auth', 'types:errors'],
  },
  {
    name: 'layouts',
    matches: /^layouts\//,
    imports: ['components', 'domain', 'lib', 'styles', 'types:queries', 'types:auth'],
  },
  {
    name: 'api',
    matches: /^pages\/api\//,
    imports: [
      'door',
      'rules',
      'schemas',
      'services',
      'queries',
      'documents',
      'payments',
      'auth',
      'errors',
      'domain',
      'lib',
      'env',
      'db',
      'log',
      'live',
      'openapi',
    ],
  },
  { name: 'pages', matches: /^pages\//, imports: forPages },
  {
    name: 'middleware',
    matches: /^(middleware|env\.d)$/,
    imports: ['auth', 'db', 'door', 'env', 'errors', 'lib', 'log', 'domain', 'queries', 'rules'],
  },
  { name: 'env', matches: /^server\/env$/, imports: [] },
  { name: 'log', matches: /^server\/log$/, imports: [] },
  { name: 'errors', matches: /^server\/errors$/, imports: [] },
  { name: 'write', matches: /^server\/write$/, imports: ['db', 'errors', 'domain', 'lib', 'types:auth'] },
  {
    name: 'door',
    matches: /^server\/(door|doors|body|form-return|api-routes)$/,
    imports: ['auth', 'db', 'domain', 'env', 'errors', 'lib', 'log', 'rules', 'schemas', 'write'],
  },
  { name: 'rules', matches: /^server\/rules$/, imports: ['domain'] },
  { name: 'db', matches: /^server\/db\//, imports: ['domain', 'lib', 'env'] },
  { name: 'pdf', matches: /^server\/pdf\//, imports: ['domain', 'lib'] },
  { name: 'mail', matches: /^server\/mail\//, imports: ['domain', 'lib'] },
  { name: 'keys', matches: /^server\/keys\//, imports: ['domain', 'lib'] },
  { name: 'files', matches: /^server\/files\//, imports: ['db', 'domain', 'lib', 'errors', 'write'] },
  {
    name: 'queries',
    matches: /^server\/queries\//,
    imports: ['errors', 'domain', 'schemas', 'lib', 'db', 'keys'],
  },
  {
    name: 'services',
    matches: /^server\/services\//,
    imports: ['domain', 'schemas', 'lib', 'queries', 'db', 'write', 'errors', 'files', 'keys', 'auth', 'env'],
  },
  {
    name: 'documents',
    matches: /^server\/documents\//,
    imports: [
      'keys',
      'env',
      'auth',
      'queries',
      'pdf',
      'mail',
      'domain',
      'lib',
      'files',
      'types:db',
      'errors',
      'rules',
    ],
  },
  {
    name: 'payments',
    matches: /^server\/payments\//,
    imports: ['domain', 'schemas', 'lib', 'services', 'queries', 'env', 'db', 'errors', 'write', 'log'],
  },
  { name: 'live', matches: /^server\/live\//, imports: ['queries', 'db', 'log', 'types:schemas'] },
  {
    name: 'openapi',
    matches: /^server\/openapi\//,
    imports: ['errors', 'auth', 'types:door', 'types:rules'],
  },
  { name: 'auth', matches: /^server\/auth\//, imports: ['db', 'lib', 'env', 'domain', 'errors'] },
  { name: 'jobs', matches: /^server\/jobs\//, imports: server },
  { name: 'run', matches: /^server\/run\//, imports: server },
];
