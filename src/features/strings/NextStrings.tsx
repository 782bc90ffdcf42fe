import { ButtonLink } from '../../components/ui/Button';
import type { StringPage } from '../../schemas/api/string';
import { paths } from '../../schemas/paths';
import { nextStrings } from '../../words/strings';

/** To the strings beside it, in the order of their names. */
export function NextStrings({ page }: { page: StringPage }) {
  const { previous, next } = page.neighbours;
  return (
    <>
      {previous && (
        <ButtonLink
          href={paths.string(page.site.id, previous.id)}
          aria-label={nextStrings.toString(previous.name)}
        >
          <span aria-hidden="true">←</span> {previous.name}
        </ButtonLink>
      )}
      {next && (
        <ButtonLink href={paths.string(page.site.id, next.id)} aria-label={nextStrings.toString2(next.name)}>
          {next.name} <span aria-hidden="true">→</span>
        </ButtonLink>
      )}
    </>
  );
}
