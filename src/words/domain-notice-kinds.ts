import type { NoticeKind } from '../domain/notices/kinds';

/** What people can be told of: its name, what it means to whoever gets it, and why it can't be chosen away. */
export const noticeKindTexts = {
  hazard: {
    name: 'Not shutting down',
    meaning:
      'Voltage stands where shutdown is commanded: what to treat as live, where, and whom to call. Also when it is over.',
    fixed:
      'Always a letter at once, from every site that you see, in quiet hours too: somebody may be on that roof.',
  },
  cause: {
    name: 'Causes',
    meaning: 'What holds units or output back was found, came back, or is over.',
  },
  silence: {
    name: 'Out of hearing',
    meaning: 'A gateway or units fell silent: while they are, a shutdown of them can’t be confirmed.',
  },
  logger: {
    name: 'A logger is gone',
    meaning: 'A logger has not reported for an hour: nothing of its strings is seen, a hazard neither.',
  },
  case_mine: {
    name: 'Cases that ask for you',
    meaning: 'A case was given to you, or somebody mentioned you in one.',
  },
  case: {
    name: 'Other cases',
    meaning: 'A case was opened, closed, or opened again because the figures did not come back.',
  },
  report: {
    name: 'A customer’s report',
    meaning: 'A customer wrote that something looks wrong.',
  },
  own_report: {
    name: 'What you reported',
    meaning: 'Your report was taken up, looked into, or taken up again.',
  },
  roll_call: {
    name: 'Roll calls',
    meaning: 'A roll call ended.',
  },
  handover: {
    name: 'Handovers',
    meaning: 'The papers of a site were made. Customers get the letter that goes with them in any case.',
  },
  planned_work: {
    name: 'Planned works',
    meaning: 'Work was planned: what happens in its time raises no alarm, hazards excepted.',
  },
  webhook: {
    name: 'Calls to other systems',
    meaning: 'A webhook was switched off because its target failed for days.',
  },
} satisfies Record<NoticeKind, { name: string; meaning: string; fixed?: string }>;
