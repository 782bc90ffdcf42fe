import { useState, type FormEvent } from 'react';
import { Button } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { Field } from '../../components/ui/Field';
import { Sheet } from '../../components/ui/Sheet';
import type { TestFacts, TestRecord } from '../../domain/commissioning/shutdown-test-record';
import { cautionStep } from '../../words/shutdown-test';

interface Props {
  facts: TestFacts;
  record: TestRecord;
  person: string;
  onAccepted: (name: string) => void;
}

/** Step 2: what can hurt, read and accepted by name. */
export function CautionStep({ facts, record, person, onAccepted }: Props) {
  const [name, setName] = useState(person);
  const [read, setRead] = useState(false);
  const [tried, setTried] = useState(false);
  const nameFault = tried && name.trim().length < 2 ? cautionStep.enterYourName : undefined;
  const submit = (event: FormEvent) => {
    event.preventDefault();
    setTried(true);
    if (read && name.trim().length >= 2) onAccepted(name.trim());
  };
  return (
    <form onSubmit={submit} noValidate className="grid gap-5">
      <Caution strong={cautionStep.dcStringsAreDangerous}>{cautionStep.treatEveryConductorAs}</Caution>
      <Sheet id="caution" title={cautionStep.beforeYouGoOn}>
        <ul className="list-disc space-y-2 pl-5">
          <li>
            <strong className="font-semibold">{cautionStep.shutdownIsNotIsolation}</strong>
            {cautionStep.eachModuleAndIts}
          </li>
          <li>{cautionStep.onlyLicensedOrQualified}</li>
          <li>{cautionStep.neverOpenAConnector}</li>
          <li>{cautionStep.theInstrumentIsRated}</li>
          <li>
            {cautionStep.wakelineWatches}
            <strong className="font-semibold">{cautionStep.itSwitchesNothing}</strong>
            {cautionStep.operatorOperatesInitiatorPlace(
              record.plan?.operator,
              facts.initiator.name,
              facts.initiator.place,
            )}
          </li>
          <li>{cautionStep.localCodeAndThe}</li>
        </ul>
        <label className="mt-4 flex min-h-[44px] items-center gap-3">
          <input
            type="checkbox"
            className="h-5 w-5 flex-none accent-petrol"
            checked={read}
            aria-invalid={tried && !read ? true : undefined}
            onChange={(e) => setRead(e.target.checked)}
          />
          {cautionStep.iHaveReadThis}
        </label>
        {tried && !read && (
          <p role="alert" className="text-sm font-medium text-rust-ink">
            {cautionStep.readThePointsThen}
          </p>
        )}
        <Field
          label={cautionStep.yourName}
          className="mt-3 max-w-[360px]"
          value={name}
          maxLength={120}
          error={nameFault}
          onChange={(e) => setName(e.target.value)}
        />
        <Button type="submit" weight="primary" className="mt-4 w-full sm:w-auto">
          {cautionStep.acceptAndGoOn}
        </Button>
      </Sheet>
    </form>
  );
}
