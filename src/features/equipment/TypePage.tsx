import { useRef, type ReactNode } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import type { EquipmentFamily } from '../../domain/equipment/families';
import type { CatalogueItem, ConnectorItem } from '../../schemas/api/equipment';
import { paths } from '../../schemas/paths';
import { CurveSheet } from './CurveSheet';
import { FormField } from './FormField';
import { groupsOf } from './form';
import { FAMILY_LABELS, ONE, touches, usedWords } from '../../words/equipment-sentences';
import { useTypeForm } from './use-type-form';
import { typePage } from '../../words/equipment';

interface Props {
  family: EquipmentFamily;
  /** null: a new type. */
  item: CatalogueItem | null;
  connectors: readonly ConnectorItem[];
  mayWrite: boolean;
  /** "Orla Nettlebeck on 3 Nov, 14:02"; null: never changed since it was entered with the catalogue. */
  changed: string | null;
}

/** The form of one type, new or there already; a module's with the curve that follows from it. */
export function TypePage({ family, item: start, connectors, mayWrite, changed }: Props) {
  const form = useTypeForm(family, start);
  const { item, saving } = form;
  const ref = useRef<HTMLFormElement>(null);
  const name = (form.state.typed.name ?? '').trim();
  const submit = async (version?: string) => {
    const done = await form.save(version);
    if (!done)
      requestAnimationFrame(() => {
        const wrong = ref.current?.querySelector<HTMLElement>('[aria-invalid="true"], [data-open-doubt]');
        wrong?.focus();
      });
  };
  return (
    <>
      <Heading
        crumbs={[
          { label: typePage.equipment, href: paths.equipment() },
          { label: FAMILY_LABELS[family], href: paths.equipmentList(family) },
        ]}
        finding={item ? String(item.entry.name) : typePage.aNewFamily(ONE[family])}
        sentence={item ? sentenceOf(item, changed) : NEW_SENTENCE[family]}
        actions={
          item &&
          mayWrite && (
            <Button
              disabled={saving.step === 'saving'}
              onClick={() => void form.setArchived(item.archivedAt === null)}
            >
              {item.archivedAt ? typePage.restore : typePage.archive}
            </Button>
          )
        }
      />
      {item?.archivedAt && (
        <div className="mb-5">
          <Notice kind="stale" title={typePage.thisTypeIsArchived}>
            {typePage.itCantBeChosen}
          </Notice>
        </div>
      )}
      <form
        ref={ref}
        noValidate
        onSubmit={(event) => {
          event.preventDefault();
          void submit();
        }}
        className={
          family === 'modules'
            ? 'grid items-start gap-5 lg:grid-cols-[minmax(0,1fr)_minmax(0,1fr)]'
            : 'grid max-w-[860px] gap-5'
        }
      >
        <div className="grid gap-5">
          {groupsOf(family).map((group) => (
            <Sheet key={group.title} title={group.title} id={group.title.replace(/\W+/g, '-').toLowerCase()}>
              <div className="grid gap-x-5 gap-y-4 sm:grid-cols-2">
                {group.fields.map((field) => (
                  <FormField
                    key={field.key}
                    field={field}
                    value={form.state.typed[field.key] ?? ''}
                    error={form.errorOf(field)}
                    theirs={form.theirsOf(field)}
                    connectors={connectors}
                    disabled={!mayWrite}
                    onChange={(value) => form.setField(field, value)}
                    onLeave={() => form.leave(field)}
                  />
                ))}
              </div>
            </Sheet>
          ))}
        </div>
        {family === 'modules' && (
          <div className="min-w-0 lg:col-start-2 lg:row-span-2 lg:row-start-1 lg:h-full">
            <CurveSheet reading={form.deferred} />
          </div>
        )}
        {mayWrite && (
          <div className="grid gap-5">
            <Doubts form={form} />
            <SavePanel form={form} family={family} name={name} onSave={(version) => void submit(version)} />
          </div>
        )}
      </form>
    </>
  );
}

const NEW_SENTENCE: Record<EquipmentFamily, string> = {
  modules: typePage.typeWhatTheDatasheet,
  units: typePage.chooseAKindIt,
  connectors: typePage.typeMakerAndType,
  inverters: typePage.typeTheDcSide,
};

function sentenceOf(item: CatalogueItem, changed: string | null): ReactNode {
  const use = item.strings + item.types === 0 ? typePage.notUsedYet : typePage.usedBy(usedWords(item));
  return `${use}.${changed ? typePage.lastChangedBy(changed) : ''}`;
}

type Form = ReturnType<typeof useTypeForm>;

/** What is unusual, each to be accepted by a person. */
function Doubts({ form }: { form: Form }) {
  const { doubts } = form.reading;
  if (doubts.length === 0) return null;
  return (
    <Sheet title={typePage.worthASecondLook} id="doubts" aside={typePage.toDecide(form.open.length)}>
      <ul className="grid gap-3">
        {doubts.map((doubt) => (
          <li key={doubt.key}>
            <p>{doubt.message}</p>
            <label className="target flex items-center gap-2.5 text-ink-2">
              <input
                type="checkbox"
                className="h-5 w-5 accent-[var(--petrol)]"
                checked={form.state.accepted.includes(doubt.key)}
                data-open-doubt={form.state.accepted.includes(doubt.key) ? undefined : ''}
                onChange={(event) => form.accept(doubt.key, event.target.checked)}
              />
              {typePage.theSheetSaysSo}
            </label>
          </li>
        ))}
      </ul>
    </Sheet>
  );
}

interface SaveProps {
  form: Form;
  family: EquipmentFamily;
  name: string;
  onSave: (version?: string) => void;
}

function SavePanel({ form, family, name, onSave }: SaveProps) {
  const { item, saving } = form;
  const busy = saving.step === 'saving';
  const faults = Object.keys(form.reading.faults).length;
  const touched = item && form.dirty ? touches(item) : null;
  return (
    <div className="grid gap-3">
      {touched && <p className="max-w-[760px] text-ink-2">{touched}</p>}
      {saving.step === 'failed' && (
        <Notice kind="failed" title={typePage.notSaved}>
          {saving.message}
        </Notice>
      )}
      {saving.step === 'saved' && (
        <Notice
          kind="done"
          title={typePage.isSaved(name)}
          action={<ButtonLink href={paths.equipmentList(family)}>{typePage.backToTheList}</ButtonLink>}
        />
      )}
      {saving.step === 'overtaken' && (
        <Notice
          kind="stale"
          title={typePage.somebodyElseSavedThis}
          action={
            <div className="flex flex-wrap gap-2">
              <Button onClick={() => form.takeTheirs(saving.theirs)}>{typePage.takeTheirs}</Button>
              <Button weight="primary" onClick={() => onSave(saving.theirs.version)}>
                {typePage.saveMineOverIt}
              </Button>
            </div>
          }
        >
          {saving.message}
        </Notice>
      )}
      {saving.step !== 'overtaken' && (
        <div className="flex flex-wrap items-center gap-x-4 gap-y-2">
          <Button weight="primary" type="submit" disabled={busy || (item !== null && !form.dirty)}>
            {busy ? typePage.saving : item ? typePage.saveTheChange : typePage.saveThe(ONE[family])}
          </Button>
          <p role="status" className="text-sm text-ink-2">
            {faults > 0
              ? typePage.notCompleteYet(faults)
              : form.open.length > 0
                ? typePage.decideWhatIsWorth
                : ''}
          </p>
        </div>
      )}
    </div>
  );
}
