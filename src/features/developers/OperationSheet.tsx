import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Fold } from '../../components/ui/Fold';
import { Sheet } from '../../components/ui/Sheet';
import type { FieldShown, OperationShown } from '../../schemas/api/developers';
import { operationSheet } from '../../words/developers';

/** `code` in a description stands in the text of the document as Markdown. */
function Words({ text }: { text: string }) {
  return (
    <>
      {text.split(/(`[^`]+`)/).map((part, i) =>
        part.startsWith('`') ? (
          <code key={i} className="bg-film px-1 font-mono text-[0.92em]">
            {part.slice(1, -1)}
          </code>
        ) : (
          part
        ),
      )}
    </>
  );
}

/** One operation: what it is for, what it takes, what it answers, and a command to try it. */
export function OperationSheet({
  operation: o,
  onCopied,
}: {
  operation: OperationShown;
  onCopied: () => void;
}) {
  return (
    <Sheet
      id={o.id}
      level={3}
      title={
        <span className="font-mono text-[15px] [overflow-wrap:anywhere]">
          <span className="font-semibold">{o.method}</span> {o.path}
        </span>
      }
      aside={
        o.scope ? (
          <>
            {operationSheet.scope}
            <code className="font-mono">{o.scope}</code>
          </>
        ) : (
          operationSheet.anyToken
        )
      }
    >
      <p className="font-medium">{o.summary}</p>
      <p className="mt-1 max-w-[760px] text-ink-2">
        <Words text={o.words} />
      </p>
      <Example curl={o.curl} id={o.id} onCopied={onCopied} />
      {o.takes.length > 0 && <Fields title={operationSheet.itTakes} fields={o.takes} />}
      <Fold
        title={operationSheet.itAnswers}
        opens={o.answers.map((a) => a.status).join(', ')}
        className="mt-4"
      >
        <dl className="pb-3">
          {o.answers.map((a) => (
            <div key={a.status} className="py-1.5 sm:flex sm:gap-4">
              <dt className="w-14 shrink-0 font-mono font-medium">{a.status}</dt>
              <dd className="min-w-0 flex-1">
                <Words text={a.words} />
                {a.type && <span className="block text-sm text-ink-2">{a.type}</span>}
                {a.fields.length > 0 && <Fields title={operationSheet.fields} fields={a.fields} />}
              </dd>
            </div>
          ))}
        </dl>
      </Fold>
    </Sheet>
  );
}

function Fields({ title, fields }: { title: string; fields: readonly FieldShown[] }) {
  return (
    <div className="mt-4">
      <h4 className="mb-1 text-sm font-medium text-ink-2">{title}</h4>
      <ul className="divide-y divide-rule-faint border-y border-rule-faint">
        {fields.map((f) => (
          <li
            key={`${f.where} ${f.name}`}
            className="py-1.5 sm:grid sm:grid-cols-[200px_minmax(0,1fr)] sm:gap-4"
          >
            <p className="min-w-0">
              <code className="font-mono text-[14px] [overflow-wrap:anywhere]">{f.name}</code>
              {(f.where || f.required) && (
                <span className="ml-2 text-sm text-ink-2">
                  {f.where}
                  {f.where && f.required && operationSheet.needed}
                </span>
              )}
            </p>
            <p className="min-w-0 [overflow-wrap:anywhere]">
              {f.type}
              {f.words && (
                <span className="text-ink-2">
                  . <Words text={f.words} />
                </span>
              )}
            </p>
          </li>
        ))}
      </ul>
    </div>
  );
}

function Example({ curl, id, onCopied }: { curl: string; id: string; onCopied: () => void }) {
  const [copied, setCopied] = useState(false);
  return (
    <div className="mt-3">
      <pre
        data-example={id}
        tabIndex={0}
        aria-label={operationSheet.exampleForAShell}
        className="whitespace-pre-wrap border border-rule bg-film px-3 py-2.5 font-mono text-[13px] leading-5 [overflow-wrap:anywhere]"
      >
        {curl}
      </pre>
      <Button
        className="no-print mt-2"
        onClick={() => {
          void navigator.clipboard.writeText(curl).then(
            () => {
              setCopied(true);
              onCopied();
            },
            () => setCopied(false),
          );
        }}
      >
        {copied ? operationSheet.copied : operationSheet.copyTheExample}
      </Button>
    </div>
  );
}
