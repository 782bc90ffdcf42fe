import { useState } from 'react';
import { checkDefinition } from '../../domain/commissioning/checks/list';
import type { SignOffState } from '../../domain/commissioning/checks/sign-off';
import { Button } from '../../components/ui/Button';
import { Sheet } from '../../components/ui/Sheet';
import { listed } from '../../drawings/numbers';
import { api, ApiError } from '../../lib/api';
import { ofPerson } from '../../lib/capture-queue';
import { newRef } from '../../lib/capture-records';
import { PERSON_HEADER } from '../../schemas/lists-and-limits';
import { paths } from '../../schemas/paths';
import type { ScreenProps } from './screen';
import { signOffSheet } from '../../words/capture';

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
      ? signOffSheet.waits1OneRecord(waits)
      : away
        ? signOffSheet.signingNeedsANetwork
        : string.fingerprint === ''
          ? signOffSheet.theServerIsAsked
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
      say(signOffSheet.signedOffTheInstall(string.name));
      ref.forget();
    } catch (error) {
      setFault(error instanceof ApiError ? error.message : signOffSheet.itCouldNotBe);
    }
    await phone?.refresh();
    setSigning(false);
  };
  return (
    <Sheet
      id="sign-off"
      title={sign.maySign ? signOffSheet.nothingBlocksTheSign : signOffSheet.whatBlocksTheSign}
    >
      {missing.length > 0 && (
        <p>
          {signOffSheet.notRecordedYet(
            listed(missing.map((block) => checkDefinition(block.check).name.toLowerCase())),
          )}
        </p>
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
                {signOffSheet.openCheck(checkDefinition(block.check).name)}
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
          {signOffSheet.signedBy(signOff.person, signOff.at, site.site.timeZone)}
          {signOff.stale ? signOffSheet.somethingWasRecordedSince : ''}
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
            {signOffSheet.signOffTheChecks(string.name, site.person.name)}
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
