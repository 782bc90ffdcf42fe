import { createHash, randomBytes } from 'node:crypto';

/** A token for a link in a letter: 256 random bits; the database keeps only its hash. */
export const newToken = (): string => randomBytes(32).toString('base64url');
export const tokenHash = (token: string): Buffer => createHash('sha256').update(token, 'utf8').digest();

/** As a path may carry it; anything else is no token of ours. */
export const TOKEN_PATTERN = /^[A-Za-z0-9_-]{43}$/;

/** A token for a program: its beginning says what it is, so that one that leaked is recognised. */
export const newApiToken = (): string => `wlk_${newToken()}`;
export const API_TOKEN_PATTERN = /^wlk_[A-Za-z0-9_-]{43}$/;
