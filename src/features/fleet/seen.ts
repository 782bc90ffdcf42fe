/** The cookie that remembers up to when somebody has said "Seen". */
export const SEEN_COOKIE = 'wakeline_seen';
