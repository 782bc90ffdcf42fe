import type { ComponentProps } from 'react';
import { Heading } from './Heading';
import { LiveMark } from './Live';

interface Props {
  finding: { heading: string; sentence: ComponentProps<typeof Heading>['sentence'] };
  status: { live: boolean; since: Date | null };
  timeZone: string;
  crumbs?: ComponentProps<typeof Heading>['crumbs'];
}

/** The heading of a page that changes in place: the finding, told to a screen reader too, and whether it is live. */
export function LiveHeading({ finding, status, timeZone, crumbs }: Props) {
  return (
    <>
      <Heading
        crumbs={crumbs}
        finding={finding.heading}
        sentence={finding.sentence}
        actions={
          <LiveMark
            lostSince={!status.live && status.since ? status.since.toISOString() : null}
            timeZone={timeZone}
          />
        }
      />
      <p className="sr-only" role="status">
        {finding.heading}
      </p>
    </>
  );
}
