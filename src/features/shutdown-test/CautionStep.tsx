import { useState, type SubmitEvent } from 'react';
import { Button } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { Field } from '../../components/ui/Field';
import { Sheet } from '../../components/ui/Sheet';
import type { TestFacts, TestRecord } from '../../domain/commissioning/shutdown-test-record';

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
  const nameFault = tried && name.trim().length < 2 ? 'Enter your name.' : undefined;
  const submit = (event: SubmitEvent) => {
    event.preventDefault();
    setTried(true);
    if (read && name.trim().length >= 2) onAccepted(name.trim());
  };
  return (
    <form onSubmit={submit} noValidate className="grid gap-5">
      <Caution strong="DC strings are dangerous in light: shock, arc, fire.">
        Treat every conductor as live before, during and after this test.
      </Caution>
      <Sheet id="caution" title="Before you go on">
        <ul className="list-disc space-y-2 pl-5">
          <li>
            <strong className="font-semibold">Shutdown is not isolation.</strong> Each module and its leads to
            its unit stay at module voltage.
          </li>
          <li>
            Only licensed or qualified people measure, in the protective equipment that local rules ask for.
          </li>
          <li>
            Never open a connector under load. Nobody works on the strings or stands on the roof while the
            test runs.
          </li>
          <li>
            The instrument is rated for the string’s voltage and proved on a known source before and after. A
            reading of zero proves nothing if the instrument is broken.
          </li>
          <li>
            Wakeline watches. <strong className="font-semibold">It switches nothing</strong>:{' '}
            {record.plan?.operator ?? 'a person'} operates {facts.initiator.name}
            {facts.initiator.place ? ` (${facts.initiator.place})` : ''} by hand.
          </li>
          <li>
            Local code and the authority having jurisdiction come first. Isolate, lock out, prove dead before
            any work.
          </li>
        </ul>
        <label className="mt-4 flex min-h-[44px] items-center gap-3">
          <input
            type="checkbox"
            className="h-5 w-5 flex-none accent-petrol"
            checked={read}
            aria-invalid={tried && !read ? true : undefined}
            onChange={(e) => setRead(e.target.checked)}
          />
          I have read this and told everybody here
        </label>
        {tried && !read && (
          <p role="alert" className="text-sm font-medium text-rust-ink">
            Read the points, then tick the box.
          </p>
        )}
        <Field
          label="Your name"
          className="mt-3 max-w-[360px]"
          value={name}
          maxLength={120}
          error={nameFault}
          onChange={(e) => setName(e.target.value)}
        />
        <Button type="submit" weight="primary" className="mt-4 w-full sm:w-auto">
          Accept and go on
        </Button>
      </Sheet>
    </form>
  );
}
