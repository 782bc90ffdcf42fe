import { useState } from 'react';
import { checkDefinition } from '../../domain/commissioning/checks/list';
import type { SignOffState } from '../../domain/commissioning/checks/sign-off';
import { Button } from '../../components/ui/Button';
import { Sheet } from '../../components/ui/Sheet';
import { listed } from '../../drawings/numbers';
import { fullTime } from '../../drawings/times';
import { api, ApiError } from '../../lib/api';
import { ofPerson } from '../../lib/capture-queue';
import { newRef } from '../../lib/capture-records';
import { PERSON_HEADER } from '../../schemas/api/capture';
import { paths } from '../../schemas/paths';
import type { ScreenProps } from './screen';

/** The signature under a string's checks: what blocks it, what it does not cover, and the button. Needs a network. */
export function SignOffSheet({
  phone,
  state,
  site,
  string,
  sign,
  change,
  say,
}: ScreenProps & { sign: SignOffState }) {
  const [signing, setSigning] = useState(false);
  const [fault, setFault] = useState('');
  const [ref] = useState(newRefOnce);
  const waits = ofPerson(state.records, site.person.id).filter(
    (r) => r.string === string.id && r.kind === 'check',
  ).length;
  const away = state.unreachableSince !== null || state.link.state !== 'open';
  const why =
    waits > 0
      ? `${waits === 1 ? 'One record' : `${waits} records`} of this string must reach the server first.`
      : away
        ? 'Signing needs a network. Everything else is kept until then.'
        : string.fingerprint === ''
          ? 'The server is asked for the checks as it has them.'
          : '';
  const { signOff } = string;
  const missing = sign.blocks.filter((block) => block.kind === 'missing');
  const submit = async () => {
    setSigning(true);
    setFault('');
    try {
      await api(paths.api.signOff(string.id), {
        method: 'POST',
        body: { ref: ref(), fingerprint: string.fingerprint },
        headers: { [PERSON_HEADER]: site.person.id },
      });
      say(`Signed off: the install checks of ${string.name}.`);
      ref.forget();
    } catch (error) {
      setFault(error instanceof ApiError ? error.message : 'It could not be signed. Try again.');
    }
    await phone?.refresh();
    setSigning(false);
  };
  return (
    <Sheet id="sign-off" title={sign.maySign ? 'Nothing blocks the sign-off' : 'What blocks the sign-off'}>
      {missing.length > 0 && (
        <p>{`Not recorded yet: ${listed(missing.map((block) => checkDefinition(block.check).name.toLowerCase()))}.`}</p>
      )}
      <ul className="space-y-2">
        {sign.blocks
          .filter((block) => block.kind !== 'missing')
          .map((block) => (
            <li key={`${block.check} ${block.words}`} className="mt-2">
              <p className="font-medium text-rust-ink">{block.words}</p>
              <p className="text-sm text-ink-2">{block.remedy}</p>
              <button
                type="button"
                className="min-h-[44px] text-petrol underline underline-offset-[3px]"
                onClick={() => change({ check: block.check, draft: '', fix: '' })}
              >
                {`Open ${checkDefinition(block.check).name.toLowerCase()}`}
              </button>
            </li>
          ))}
      </ul>
      {sign.remarks.length > 0 && (
        <ul className="mt-2 list-disc space-y-1 pl-5 text-sm text-ink-2">
          {sign.remarks.map((remark) => (
            <li key={remark}>{remark}</li>
          ))}
        </ul>
      )}
      {signOff && (
        <p className={`mt-3 ${signOff.stale ? 'text-rust-ink' : ''}`}>
          {`Signed by ${signOff.person}, ${fullTime(signOff.at, site.site.timeZone)}.`}
          {signOff.stale ? ' Something was recorded since: sign again.' : ''}
        </p>
      )}
      {sign.maySign && (!signOff || signOff.stale) && (
        <>
          {why && <p className="mt-3 text-ink-2">{why}</p>}
          {fault && (
            <p role="alert" className="mt-3 font-medium text-rust-ink">
              {fault}
            </p>
          )}
          <Button
            weight="primary"
            className="mt-3 min-h-[52px] w-full"
            disabled={signing || why !== '' || !phone}
            onClick={() => void submit()}
          >
            {`Sign off the checks of ${string.name} as ${site.person.name}`}
          </Button>
        </>
      )}
    </Sheet>
  );
}

/** One identifier until the signature is stored: pressing again after a lost answer signs once. */
function newRefOnce(): { (): string; forget: () => void } {
  let made: string | null = null;
  return Object.assign(() => (made ??= newRef()), { forget: () => (made = null) });
}
