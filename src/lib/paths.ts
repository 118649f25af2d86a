const segment = (text: string | number): string => encodeURIComponent(String(text));

function withQuery(path: string, query: Record<string, string | readonly string[] | undefined>): string {
  const search = new URLSearchParams();
  for (const [name, value] of Object.entries(query)) {
    if (value === undefined) continue;
    for (const one of typeof value === 'string' ? [value] : value) search.append(name, one);
  }
  const text = search.toString();
  return text === '' ? path : `${path}?${text}`;
}

/** Every address inside the application, built in one place. */
export const paths = {
  // The shop and the buyer's pages
  shop: () => '/',
  rig: (slug: string) => `/rigs/${segment(slug)}`,
  checkout: (query?: { batch: string; option: readonly string[] }) => withQuery('/checkout', { ...query }),
  orderByLink: (token: string) => `/orders/${segment(token)}`,
  payByLink: (token: string) => `/orders/${segment(token)}/pay`,
  myOrders: () => '/my/orders',
  myOrder: (number: number) => `/my/orders/${segment(number)}`,
  certificateCheck: () => '/certificates',
  certificateByCode: (code: string) => `/certificates/${segment(code)}`,
  certificateKeys: () => '/certificates/keys',
  signIn: (next?: string) => withQuery('/sign-in', { next }),
  signInLink: (token: string) => `/sign-in/${segment(token)}`,
  // The works side
  works: () => '/works',
  scan: (query?: string) => withQuery('/works/scan', { q: query }),
  counter: (query: { state?: string; q?: string; before?: string } = {}) => withQuery('/works/orders', query),
  worksOrder: (number: number) => `/works/orders/${segment(number)}`,
  plan: () => '/works/batches',
  batch: (number: number) => `/works/batches/${segment(number)}`,
  worksModels: () => '/works/models',
  worksModel: (slug: string, query: { show?: string; letter?: string } = {}) =>
    withQuery(`/works/models/${segment(slug)}`, query),
  bomImport: (slug: string, fileId?: number) =>
    withQuery(`/works/models/${segment(slug)}/bom-import`, {
      file: fileId === undefined ? undefined : String(fileId),
    }),
  stores: (query: Record<'q' | 'sort' | 'desc' | 'page', string | undefined> | Record<string, never> = {}) =>
    withQuery('/works/parts', query),
  part: (number: string) => `/works/parts/${segment(number)}`,
  receive: (part?: string) => withQuery('/works/lots/receive', { part }),
  lot: (number: string) => `/works/lots/${segment(number)}`,
  floor: () => '/works/floor',
  unit: (serial: string) => `/works/units/${segment(serial)}`,
  unitKit: (serial: string) => `/works/units/${segment(serial)}/kit`,
  unitBuild: (serial: string) => `/works/units/${segment(serial)}/build`,
  bench: () => '/works/bench',
  run: (serial: string, runNo: number) => `/works/units/${segment(serial)}/runs/${segment(runNo)}`,
  instruments: () => '/works/instruments',
  worksCertificate: (numberAndLetter: string) => `/works/certificates/${segment(numberAndLetter)}`,
  amendCertificate: (numberAndLetter: string) => `/works/certificates/${segment(numberAndLetter)}/amend`,
  dispatch: () => '/works/dispatch',
  packOrder: (number: number) => `/works/dispatch/${segment(number)}`,
  shipment: (number: number) => `/works/shipments/${segment(number)}`,
  office: () => '/works/people',
  worksData: () => '/works/office',
  signingKeys: () => '/works/keys',
  changes: (beforeId?: number) => withQuery('/works/changes', { before: beforeId?.toString() }),
  // The API
  api: {
    health: () => '/api/health',
    openApi: () => '/api/openapi.json',
    live: (subjects: readonly string[]) => withQuery('/api/live', { subject: subjects }),
    signIn: () => '/api/sign-in',
    signOut: () => '/api/sign-out',
    signInLinks: () => '/api/sign-in-links',
    signInLink: (token: string) => `/api/sign-in-links/${segment(token)}`,
    theme: () => '/api/theme',
    orders: () => '/api/orders',
    order: (number: number) => `/api/orders/${segment(number)}`,
    orderPayments: (number: number) => `/api/orders/${segment(number)}/payments`,
    orderCheckouts: (number: number) => `/api/orders/${segment(number)}/checkouts`,
    linkCheckouts: (token: string) => `/api/orders/by-link/${segment(token)}/checkouts`,
    balanceAsks: (number: number) => `/api/orders/${segment(number)}/balance-asks`,
    providerEvents: () => '/api/provider-events',
    batches: () => '/api/batches',
    batch: (number: number) => `/api/batches/${segment(number)}`,
    models: () => '/api/models',
    boms: (slug: string) => `/api/models/${segment(slug)}/boms`,
    bomLine: (slug: string, letter: string, lineNo: number) =>
      `/api/models/${segment(slug)}/boms/${segment(letter)}/lines/${segment(lineNo)}`,
    releases: (slug: string) => `/api/models/${segment(slug)}/releases`,
    bomReading: () => '/api/bom-readings',
    parts: () => '/api/parts',
    part: (number: string) => `/api/parts/${segment(number)}`,
    lots: () => '/api/lots',
    lot: (number: string) => `/api/lots/${segment(number)}`,
    lotState: (number: string) => `/api/lots/${segment(number)}/state`,
    lotCounts: (number: string) => `/api/lots/${segment(number)}/counts`,
    lotReversals: (number: string) => `/api/lots/${segment(number)}/reversals`,
    unit: (serial: string) => `/api/units/${segment(serial)}`,
    picks: (serial: string) => `/api/units/${segment(serial)}/picks`,
    pick: (serial: string, pickId: number) => `/api/units/${segment(serial)}/picks/${segment(pickId)}`,
    batchPicks: (number: number) => `/api/batches/${segment(number)}/picks`,
    kit: (serial: string) => `/api/units/${segment(serial)}/kit`,
    steps: (serial: string) => `/api/units/${segment(serial)}/steps`,
    holds: (serial: string) => `/api/units/${segment(serial)}/holds`,
    hold: (serial: string, holdId: number) => `/api/units/${segment(serial)}/holds/${segment(holdId)}`,
    reworks: (serial: string) => `/api/units/${segment(serial)}/reworks`,
    reworkClosing: (serial: string) => `/api/units/${segment(serial)}/reworks/closing`,
    runs: (serial: string) => `/api/units/${segment(serial)}/runs`,
    run: (runId: number) => `/api/runs/${segment(runId)}`,
    readings: (runId: number) => `/api/runs/${segment(runId)}/readings`,
    reading: (runId: number, readingId: number) =>
      `/api/runs/${segment(runId)}/readings/${segment(readingId)}`,
    sweeps: (runId: number) => `/api/runs/${segment(runId)}/sweeps`,
    readingVoiding: (runId: number, readingId: number) =>
      `/api/runs/${segment(runId)}/readings/${segment(readingId)}/voiding`,
    runConditions: (runId: number) => `/api/runs/${segment(runId)}/conditions`,
    runTester: (runId: number) => `/api/runs/${segment(runId)}/tester`,
    runClosing: (runId: number) => `/api/runs/${segment(runId)}/closing`,
    instruments: () => '/api/instruments',
    instrumentRevisions: (id: number) => `/api/instruments/${segment(id)}/revisions`,
    signalPaths: () => '/api/paths',
    signalPathRevisions: (id: number) => `/api/paths/${segment(id)}/revisions`,
    certificates: () => '/api/certificates',
    certificate: (code: string) => `/api/certificates/${segment(code)}`,
    certificatePdf: (code: string) => `/api/certificates/${segment(code)}/pdf`,
    certificateAmendments: (code: string) => `/api/certificates/${segment(code)}/amendments`,
    certificateKeys: () => '/api/certificate-keys',
    certificateKeyPem: (keyId: string) => `/api/certificate-keys/${segment(keyId)}/pem`,
    shipments: () => '/api/shipments',
    shipment: (number: number) => `/api/shipments/${segment(number)}`,
    unpacking: (number: number) => `/api/shipments/${segment(number)}/unpacking`,
    packingList: (number: number) => `/api/shipments/${segment(number)}/packing-list`,
    people: () => '/api/people',
    person: (id: number) => `/api/people/${segment(id)}`,
    works: () => '/api/works',
  },
} as const;
