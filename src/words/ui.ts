import { number } from '../drawings/numbers';
import { clock } from '../drawings/times';

export const caution = {
  safetyCaution: (strong: string) => `Safety caution: ${strong}`,
};

export const uiDialog = {
  close: 'Close',
};

export const fold = {
  fold: 'Fold',
};

export const heading = {
  whereThisPageIs: 'Where this page is',
};

export const live = {
  notLiveSince: (lostSince: string, timeZone: string) => ` Not live since ${clock(lostSince, timeZone)}`,
};

export const notRead = {
  tryAgain: 'Try again',
};

export const showMore = {
  showMoreOfShown: (what: string, shown: number, n: number) =>
    `Show more ${what} (${number(shown)} of ${number(n)} shown)`,
};
