import { door } from '../../../server/v1/door';

// the token is asked for at the door, operation by operation; nobody's session counts here
const open = door({ permission: 'public' });

export const GET = open;
export const POST = open;
export const PUT = open;
export const PATCH = open;
export const DELETE = open;
export const HEAD = open;
export const OPTIONS = open;
