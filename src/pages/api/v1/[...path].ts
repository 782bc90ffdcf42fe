import { publicEndpoint } from '../../../server/http/endpoint';
import { throughDoor } from '../../../server/v1/door';

// the token is asked for at the door, operation by operation; nobody's session counts here
export const GET = publicEndpoint({ permission: 'public' }, ({ context }) => throughDoor(context));
export const POST = publicEndpoint({ permission: 'public' }, ({ context }) => throughDoor(context));
export const PUT = publicEndpoint({ permission: 'public' }, ({ context }) => throughDoor(context));
export const PATCH = publicEndpoint({ permission: 'public' }, ({ context }) => throughDoor(context));
export const DELETE = publicEndpoint({ permission: 'public' }, ({ context }) => throughDoor(context));
export const HEAD = publicEndpoint({ permission: 'public' }, ({ context }) => throughDoor(context));
export const OPTIONS = publicEndpoint({ permission: 'public' }, ({ context }) => throughDoor(context));
