import { QueryClient, QueryClientProvider, useMutation, useQuery } from '@tanstack/react-query';
import { useEffect, useRef, useState } from 'react';
import { Button } from '~/components/ui/Button';
import { Notice } from '~/components/ui/Notice';
import { pointLabel } from '~/domain/bench/judge-run';
import { knownQuantity } from '~/domain/bench/quantities';
import { paths } from '~/lib/paths';
import { stationSchema } from '~/schemas/bench-station';
import type { Station as StationData, StationReading } from '~/schemas/bench-station';
import { AlikePlot } from './AlikePlot';
import { BeforeYouKey } from './BeforeYouKey';
import { CloseDialog } from './CloseDialog';
import { Concession } from './Concession';
import { KeyList } from './KeyList';
import { ReadingDetail } from './ReadingDetail';
import { ReadingGrid } from './ReadingGrid';
import { ReadingInHand } from './ReadingInHand';
import { RunFacts } from './RunFacts';
import type { ConditionTexts } from './RunFacts';
import { RunState } from './RunState';
import { gridOf, isRead, judgeStation, withEntry } from './run-sheet';
import type { Equipment } from './run-sheet';
import { ScratchPanel } from './ScratchPanel';
import { Refused, send } from './send';
import { SweepPanel } from './SweepPanel';
import { useCells } from './use-cells';
import { useEntries } from './use-entries';
import { useEquipment } from './use-equipment';
import { useStationKeys } from './use-station-keys';
import { VoidDialog } from './VoidDialog';

interface Props {
  station: StationData;
  equipment: Equipment;
  personId: number;
  mayTest: boolean;
  isOwner: boolean;
  formKey: string;
}

/** The station of the final test. */
export function Station(props: Props) {
  const [client] = useState(() => new QueryClient());
  return (
    <QueryClientProvider client={client}>
      <Bench {...props} />
    </QueryClientProvider>
  );
}

const POWER = knownQuantity('rf_power');
const HARMONIC = knownQuantity('harmonic_2');

type Asking =
  { kind: 'keys' } | { kind: 'scratch' } | { kind: 'close' } | { kind: 'void'; reading: StationReading };

function Bench({ station: first, equipment, personId, mayTest, isOwner, formKey }: Props) {
  const runId = first.run.id;
  const { data: stored, refetch } = useQuery({
    queryKey: ['run', runId],
    queryFn: () => readRun(runId),
    initialData: first,
    staleTime: 2000,
  });
  const entries = useEntries(runId, refetch);
  const isOwn = stored.run.testerUserId === personId;
  const editable = stored.run.state === 'open' && isOwn && mayTest;
  const { chosenFor, choose } = useEquipment(equipment, stored.sheet.readings, stored.sheet.context.testedOn);
  const coming = entries.kept.filter(({ refused }) => refused === undefined);
  const station = coming.reduce((sheet, { entry }) => withEntry(sheet, equipment, entry), stored);
  const cells = useCells({ station, equipment, entries, chosenFor, editable });
  const judged = judgeStation(cells.shown);
  const grid = gridOf(station.sheet.points);
  const [order, setOrder] = useState<'quantity' | 'band'>('quantity');
  const [asking, setAsking] = useState<Asking | null>(null);
  const [isBudgetOpen, setBudgetOpen] = useState(false);
  const fileInput = useRef<HTMLInputElement>(null);

  const ask = useMutation({
    mutationFn: ({ url, body }: { url: string; body?: unknown }) => send(url, body, crypto.randomUUID()),
    onSettled: () => refetch(),
  });
  const { point } = cells;
  const readings = cells.shown.sheet.readings.filter(({ testPointId }) => testPointId === point?.id);
  const newest = readings.findLast(({ voided, id }) => !voided && id > 0);
  const judgement = point === undefined ? undefined : judged.judgements.get(point.id);
  const chosen = chosenFor(point?.quantity ?? POWER);
  const against = againstClosing(judged.result, coming.length, cells.unread.size);

  const leave = (): void => {
    setAsking(null);
    ask.reset();
  };
  const askVoid = (reading: StationReading | undefined): void => {
    if (editable && reading !== undefined) setAsking({ kind: 'void', reading });
  };
  useStationKeys({
    r: () => editable && readings.length > 0 && cells.readAgain(),
    v: () => askVoid(newest),
    l: () => editable && fileInput.current?.click(),
    s: () => point !== undefined && isRead(point) && setAsking({ kind: 'scratch' }),
    b: () => setBudgetOpen(!isBudgetOpen),
    o: () => setOrder(order === 'band' ? 'quantity' : 'band'),
    c: () => editable && against === undefined && setAsking({ kind: 'close' }),
    '?': () => setAsking({ kind: 'keys' }),
  });
  useWarnBeforeLeaving(coming.length > 0);

  const required = station.sheet.points.filter((each) => each.required && isRead(each));
  const filled = required.filter(({ id }) => (judged.judgements.get(id)?.n ?? 0) > 0).length;
  const conditions = useMutation({
    mutationFn: (texts: ConditionTexts) =>
      send(paths.api.runConditions(runId), conditionsOf(texts, stored.run.version), crypto.randomUUID()),
    onSuccess: () => refetch(),
  });
  return (
    <>
      <RunState
        {...{ station, isOwn, mayTest, formKey }}
        takingOver={ask.isPending}
        onTakeOver={() => ask.mutate({ url: paths.api.runTester(runId) })}
      />
      <div className="bench">
        <div className="bench-side">
          <RunFacts
            {...{ station, editable }}
            saving={conditions.isPending}
            errors={conditions.error instanceof Refused ? errorsOf(conditions.error) : {}}
            onSave={(texts) => {
              if (changed(texts, stored)) conditions.mutate(texts);
            }}
          />
          <BeforeYouKey {...{ station, equipment }} pathRevisionId={chosenFor(POWER).pathRevisionId} />
        </div>
        <div className="bench-main">
          <div className="mb-3 flex flex-wrap items-center justify-between gap-3">
            <div className="flex flex-wrap items-baseline gap-x-4">
              <h1>Final test</h1>
              <p className="quiet">
                {filled} of {required.length} readings in
              </p>
            </div>
            {editable && (
              <div className="flex flex-wrap items-center gap-3">
                <Button
                  kind="outlined"
                  type="button"
                  aria-keyshortcuts="Alt+L"
                  onClick={() => fileInput.current?.click()}
                >
                  Load sweep
                </Button>
                <Button
                  type="button"
                  aria-keyshortcuts="Alt+C"
                  onClick={() => setAsking({ kind: 'close' })}
                  disabledReason={against}
                >
                  Close the run
                </Button>
              </div>
            )}
          </div>
          {entries.isStuck && (
            <div className="mb-3">
              <Notice tone="warn" title="Not saved yet">
                The server does not answer. What you typed is kept in this browser and sent again until it is
                taken.
              </Notice>
            </div>
          )}
          <ReadingGrid {...{ grid, judged, cells, entries, order, editable }} station={cells.shown} />
          {editable && (
            <p className="quiet mt-2 flex flex-wrap items-center gap-x-4">
              <span>
                Enter takes a value and goes on by{' '}
                <button
                  type="button"
                  className="min-h-(--check) underline"
                  aria-keyshortcuts="Alt+O"
                  onClick={() => setOrder(order === 'band' ? 'quantity' : 'band')}
                >
                  {order}
                </button>
                ; arrows move; Escape restores.
              </span>
              {point !== undefined && isRead(point) && (
                <button
                  type="button"
                  className="min-h-(--check) underline"
                  aria-keyshortcuts="Alt+S"
                  onClick={() => setAsking({ kind: 'scratch' })}
                >
                  Scratch reading
                </button>
              )}
              <button
                type="button"
                className="min-h-(--check) underline"
                onClick={() => setAsking({ kind: 'keys' })}
              >
                All keys: ?
              </button>
            </p>
          )}
          <SweepPanel
            {...{ station, equipment, editable, fileInput }}
            judgements={judged.judgements}
            band={point?.band ?? null}
            chosen={chosenFor(HARMONIC)}
            onRead={refetch}
          />
        </div>
        {point !== undefined && judgement !== undefined && (
          <div className="bench-side">
            <ReadingInHand
              {...{ point, judgement }}
              unread={cells.unread.get(point.id)}
              refused={entries.kept.find((one) => one.entry.testPointId === point.id && one.refused)?.refused}
              onConfirm={() => cells.commit(true)}
            />
            <div className="bench-detail grid gap-5">
              <AlikePlot runId={runId} {...{ point, judgement }} />
              <Concession key={point.id} {...{ station, point, judgement, isOwner }} onChanged={refetch} />
              <ReadingDetail
                {...{ point, judgement, readings, equipment, chosen, editable, isBudgetOpen }}
                onBudget={setBudgetOpen}
                onChoose={(next) => choose(point.quantity.key, next)}
                onReadAgain={cells.readAgain}
                onVoid={askVoid}
                onHoldAttenuation={cells.holdAttenuation}
              />
              {station.run.state === 'open' && judged.result.why.length > 0 && (
                <section className="sheet" aria-labelledby="against-closing">
                  <h2 id="against-closing" className="mb-1">
                    {judged.result.canClose ? 'What it would close as' : 'What stands against closing'}
                  </h2>
                  <ul className="grid gap-1 text-[0.9375rem] leading-snug">
                    {judged.result.why.map((sentence) => (
                      <li key={sentence}>{sentence}</li>
                    ))}
                  </ul>
                </section>
              )}
            </div>
          </div>
        )}
      </div>
      {asking?.kind === 'keys' && <KeyList onLeave={leave} />}
      {asking?.kind === 'scratch' && point !== undefined && (
        <ScratchPanel {...{ station, equipment, point, chosen }} onLeave={leave} />
      )}
      {asking?.kind === 'close' && (
        <CloseDialog
          result={judged.result}
          runNo={station.run.runNo}
          busy={ask.isPending}
          error={ask.error?.message}
          onLeave={leave}
          onClose={() => ask.mutate({ url: paths.api.runClosing(runId) }, { onSuccess: leave })}
        />
      )}
      {asking?.kind === 'void' && (
        <VoidDialog
          label={point === undefined ? '' : pointLabel(point)}
          reading={asking.reading}
          busy={ask.isPending}
          error={ask.error?.message}
          onLeave={leave}
          onVoid={(reason) =>
            ask.mutate(
              { url: paths.api.readingVoiding(runId, asking.reading.id), body: { reason } },
              { onSuccess: leave },
            )
          }
        />
      )}
    </>
  );
}

async function readRun(runId: number): Promise<StationData> {
  const response = await fetch(paths.api.run(runId), { headers: { accept: 'application/json' } });
  if (!response.ok) throw new Error('The run could not be read.');
  return stationSchema.parse(await response.json());
}

/** Why the run cannot be closed now, short enough to stand beside the button. */
function againstClosing(
  { canClose, why }: { canClose: boolean; why: string[] },
  coming: number,
  unread: number,
): string | undefined {
  if (coming > 0) return coming === 1 ? 'One value is not saved yet.' : `${coming} values are not saved yet.`;
  if (unread > 0) return unread === 1 ? 'One cell was not taken.' : `${unread} cells were not taken.`;
  if (canClose) return undefined;
  return why.length === 1 ? why[0] : `${why.length} points are not decided.`;
}

function conditionsOf({ supplyV, ambientC, firmwareVersion, alignment }: ConditionTexts, version: number) {
  const pairs = alignment.split('\n').flatMap((line) => {
    const [name = '', ...value] = line.split(':');
    return name.trim() === '' ? [] : [[name.trim(), value.join(':').trim()] as const];
  });
  const plain = (text: string) => text.trim().replace(',', '.').replace('−', '-');
  return {
    supplyV: plain(supplyV),
    ambientC: plain(ambientC),
    firmwareVersion,
    alignment: Object.fromEntries(pairs),
    version,
  };
}

function changed(texts: ConditionTexts, { run }: StationData): boolean {
  const now = conditionsOf(texts, run.version);
  const same = (text: string, value: number | null) => (text === '' ? null : Number(text)) === value;
  return !(
    same(now.supplyV, run.supplyV) &&
    same(now.ambientC, run.ambientC) &&
    now.firmwareVersion.trim() === (run.firmwareVersion ?? '') &&
    JSON.stringify(now.alignment) === JSON.stringify(run.alignment)
  );
}

function errorsOf({ refusal }: Refused): Record<string, string> {
  return Object.keys(refusal.fields).length > 0 ? refusal.fields : { supplyV: refusal.detail };
}

function useWarnBeforeLeaving(isNeeded: boolean): void {
  useEffect(() => {
    if (!isNeeded) return;
    const warn = (event: BeforeUnloadEvent): void => event.preventDefault();
    window.addEventListener('beforeunload', warn);
    return () => window.removeEventListener('beforeunload', warn);
  }, [isNeeded]);
}
