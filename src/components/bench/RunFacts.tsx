import { useState } from 'react';
import { Button } from '~/components/ui/Button';
import { DefinitionList } from '~/components/ui/DefinitionList';
import { Field } from '~/components/ui/Field';
import { Tag } from '~/components/ui/Tag';
import { TextArea } from '~/components/ui/TextArea';
import { formatNumber } from '~/domain/bench/format';
import { paths } from '~/lib/paths';
import type { Station } from '~/schemas/bench-station';

/** The conditions as they are typed; the alignment one a line, `BFO: +12 Hz`. */
export interface ConditionTexts {
  supplyV: string;
  ambientC: string;
  firmwareVersion: string;
  alignment: string;
}

interface Props {
  station: Station;
  editable: boolean;
  saving: boolean;
  /** Field → sentence, as the server said. */
  errors: Record<string, string>;
  onSave: (texts: ConditionTexts) => void;
}

/** The tag, what the run goes by, and its conditions. */
export function RunFacts({ station, editable, saving, errors, onSave }: Props) {
  const { run, unit, plan, limits } = station;
  const [texts, setTexts] = useState<ConditionTexts>({
    supplyV: run.supplyV === null ? '' : String(run.supplyV),
    ambientC: run.ambientC === null ? '' : String(run.ambientC),
    firmwareVersion: run.firmwareVersion ?? '',
    alignment: Object.entries(run.alignment)
      .map(([name, value]) => `${name}: ${value}`)
      .join('\n'),
  });
  const change = (name: keyof ConditionTexts) => (event: { currentTarget: { value: string } }) =>
    setTexts({ ...texts, [name]: event.currentTarget.value });
  const save = (): void => onSave(texts);
  const shown = (value: number | null, unitText: string, digits: number) =>
    value === null ? 'not written down' : `${formatNumber(value, digits)} ${unitText}`;
  return (
    <div className="bench-facts grid content-start gap-4">
      <Tag serial={unit.serial} href={paths.unit(unit.serial)} line={unit.line} quiet={[unit.quiet]} />
      <DefinitionList
        items={[
          { term: 'Run', value: runText(station) },
          { term: 'Tester', value: run.testerName },
          { term: 'Opened', value: run.openedText },
          ...(run.closedText === null ? [] : [{ term: 'Closed', value: run.closedText }]),
          { term: 'Load', value: `${formatNumber(plan.loadOhm, 0)} Ω` },
          { term: 'Limits', value: `Test plan rev ${plan.letter}` },
          { term: 'Spurious', value: limits.title },
          { term: 'Goes to', value: limits.destination },
          ...(editable
            ? []
            : [
                { term: 'Supply', value: shown(run.supplyV, 'V', 2), mono: true },
                { term: 'Ambient', value: shown(run.ambientC, '°C', 0), mono: true },
                { term: 'Firmware', value: run.firmwareVersion ?? 'not written down', mono: true },
                ...Object.entries(run.alignment).map(([term, value]) => ({ term, value, mono: true })),
              ]),
        ]}
      />
      {editable && (
        <form
          className="grid gap-3"
          aria-label="Conditions of the run"
          onSubmit={(event) => {
            event.preventDefault();
            save();
          }}
        >
          <div className="grid grid-cols-2 gap-3">
            <Field
              name="supplyV"
              label="Supply"
              unit="V"
              mono
              inputMode="decimal"
              placeholder={formatNumber(plan.supplyV, 1)}
              value={texts.supplyV}
              error={errors['supplyV']}
              onChange={change('supplyV')}
              onBlur={save}
            />
            <Field
              name="ambientC"
              label="Ambient"
              unit="°C"
              mono
              inputMode="decimal"
              value={texts.ambientC}
              error={errors['ambientC']}
              onChange={change('ambientC')}
              onBlur={save}
            />
          </div>
          <details>
            <summary className="min-h-(--check) font-semibold">Firmware and alignment</summary>
            <div className="grid gap-3 pt-2">
              <Field
                name="firmwareVersion"
                label="Firmware"
                mono
                value={texts.firmwareVersion}
                error={errors['firmwareVersion']}
                onChange={change('firmwareVersion')}
                onBlur={save}
              />
              <TextArea
                name="alignment"
                label="Alignment"
                hint="One a line, as BFO: +12 Hz"
                value={texts.alignment}
                error={errors['alignment']}
                onChange={change('alignment')}
                onBlur={save}
              />
            </div>
          </details>
          <Button kind="outlined" busy={saving}>
            Write down the conditions
          </Button>
        </form>
      )}
    </div>
  );
}

/** `2nd, after rework`. */
function runText({ run, earlier }: Station): string {
  const name = ['', '1st', '2nd', '3rd'][run.runNo] ?? `${run.runNo}th`;
  const [before] = earlier;
  return before?.rework === undefined || before.rework === null ? name : `${name}, after rework`;
}
