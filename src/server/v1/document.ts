import {
  createDocument,
  type ZodOpenApiOperationObject,
  type ZodOpenApiPathsObject,
  type ZodOpenApiResponsesObject,
} from 'zod-openapi';
import { z } from 'zod';
import { SCOPE_WORDS } from '../../domain/access/scopes';
import { problemDocument } from '../../schemas/api/v1/common';
import { unitFrameRecord } from '../../schemas/api/v1/telemetry';
import { ingestBatch, ingestReply, rosterReply } from '../../schemas/ingest';
import { paths } from '../../schemas/paths';
import { API_LIMIT } from '../auth/limits';
import { KEY_HOURS } from './idempotent';
import type { JsonOperation, Operation, StreamOperation } from './operation';
import { OPERATIONS } from './operations';

/** The OpenAPI document of /api/v1, made from the schemas by which the door itself checks. */

const DESCRIPTION = `Read what Wakeline knows of your sites, and write a little, from a program of your own.

**Tokens.** Send \`Authorization: Bearer TOKEN\` with each request. A token is made on the account page, does what its scopes name, and never more than its person may at that moment; it ends when it runs out, when it is ended, or when its person is deactivated. Cookies are not accepted here.

**Lists** come in pages: send \`next\` of an answer as \`cursor\` of the next request, with the same filters; the Link header has the whole address. A parameter that is not known is refused by its name.

**Asking again.** Answers carry an ETag: send it as If-None-Match and get 304 while nothing has changed.

**Writing.** Send an Idempotency-Key of your own: the same request again within ${KEY_HOURS} hours gets the reply of the first (\`Idempotency-Replayed: true\`). Another request under the same key is refused with 422, and one that comes while the first is at work with 409.

**Limits.** ${API_LIMIT.requests} requests in ${API_LIMIT.windowS} seconds for each token. RateLimit says what is left (\`r\`) and for how many seconds (\`t\`); past it comes 429 with Retry-After.

**Problems** are RFC 9457 documents that name each field that was wrong, with what to do.

**Units** are SI; times are ISO 8601 in UTC; identifiers are UUIDs.

**Wakeline watches; it never switches.** Nothing here releases or shuts down anything, and nothing that it answers shows that a conductor is dead. Isolate, lock out, and prove it with a rated meter; local code and qualified people come first.`;

const PROBLEM = { 'application/problem+json': { schema: problemDocument } };
const problemOf = (description: string) => ({ description, content: PROBLEM });
const LIMIT_HEADERS = {
  RateLimit: { $ref: '#/components/headers/RateLimit' },
  'RateLimit-Policy': { $ref: '#/components/headers/RateLimitPolicy' },
} as const;

function refusals(operation: Operation): ZodOpenApiResponsesObject {
  const write = operation.method === 'POST';
  return {
    401: problemOf('No token, or none that is in force'),
    403: problemOf(
      operation.scope
        ? `The token has no scope ${operation.scope}, or its person may not`
        : 'Its person may not',
    ),
    ...(operation.path.includes('{') || operation.kind === 'stream' || write
      ? { 404: problemOf('Not there, or not for this token: both look the same') }
      : {}),
    ...(write
      ? { 409: problemOf('It clashes with what is there, or a request with this key is at work') }
      : {}),
    ...(operation.query || operation.body
      ? { 422: problemOf('Something in the request is wrong; `fields` names it') }
      : {}),
    429: {
      ...problemOf('Too many requests; wait for Retry-After'),
      headers: { 'Retry-After': { $ref: '#/components/headers/RetryAfter' }, ...LIMIT_HEADERS },
    },
    503: problemOf('Not reachable just now; try again after Retry-After'),
  };
}

function jsonAnswers(operation: JsonOperation): ZodOpenApiResponsesObject {
  const good = Object.entries(operation.statuses).map(([status, description]) => [
    status,
    {
      description,
      headers: {
        ...LIMIT_HEADERS,
        ...(operation.method === 'GET' ? { ETag: { $ref: '#/components/headers/ETag' } } : {}),
      },
      content: { 'application/json': { schema: operation.answer } },
    },
  ]);
  return {
    ...(Object.fromEntries(good) as ZodOpenApiResponsesObject),
    ...(operation.method === 'GET'
      ? { 304: { description: 'As it was when If-None-Match was answered' } }
      : {}),
  };
}

function streamAnswers(operation: StreamOperation): ZodOpenApiResponsesObject {
  const record =
    operation.id === 'streamFrames' ? z.union([operation.record, unitFrameRecord]) : operation.record;
  return {
    200: {
      description: 'Records as they are read, one a line. The schema is that of one line',
      headers: LIMIT_HEADERS,
      content: {
        'application/x-ndjson': { schema: record },
        'text/csv': { schema: { type: 'string', description: 'RFC 4180, UTF-8, with a line of headers' } },
      },
    },
  };
}

function operationObject(operation: Operation): ZodOpenApiOperationObject {
  const write = operation.method === 'POST';
  return {
    operationId: operation.id,
    tags: [operation.group],
    summary: operation.summary,
    description: operation.description,
    security: [{ token: operation.scope ? [operation.scope] : [] }],
    requestParams: {
      ...(operation.params instanceof z.ZodObject ? { path: operation.params } : {}),
      ...(operation.query instanceof z.ZodObject ? { query: operation.query } : {}),
    },
    ...(write ? { parameters: [{ $ref: '#/components/parameters/IdempotencyKey' }] } : {}),
    ...(operation.body
      ? { requestBody: { required: true, content: { 'application/json': { schema: operation.body } } } }
      : {}),
    responses: {
      ...(operation.kind === 'stream' ? streamAnswers(operation) : jsonAnswers(operation)),
      ...refusals(operation),
    },
  };
}

/** Loggers without our WebSocket: another kind of token, another door. */
const FOR_LOGGERS: ZodOpenApiPathsObject = {
  '/ingest': {
    post: {
      operationId: 'sendReadings',
      tags: ['For loggers'],
      summary: 'Readings of a logger that has no WebSocket',
      description:
        'One message, an array of them, or NDJSON; gzip is allowed. Answered after they are stored. With the token of a logger.',
      security: [{ loggerToken: [] }],
      requestBody: {
        required: true,
        content: {
          'application/json': { schema: ingestBatch },
          'application/x-ndjson': { schema: ingestBatch },
        },
      },
      responses: {
        200: {
          description: 'At least one message is stored; `refused` says which are not, and why',
          content: { 'application/json': { schema: ingestReply } },
        },
        401: problemOf('Not the token of a logger'),
        413: problemOf('Too large: send less at once'),
        422: problemOf('Nothing was stored; `fields` says why'),
        429: problemOf('Another batch of this logger is being taken'),
        503: problemOf('Full just now; send the same again after Retry-After'),
      },
    },
  },
  '/ingest/roster': {
    get: {
      operationId: 'readRoster',
      tags: ['For loggers'],
      summary: 'What a logger is to report on',
      description:
        'For reporting only: a logger may not take from it who is commanded. With the token of a logger.',
      security: [{ loggerToken: [] }],
      responses: {
        200: { description: 'The roster', content: { 'application/json': { schema: rosterReply } } },
        401: problemOf('Not the token of a logger'),
        503: problemOf('Not reachable just now'),
      },
    },
  },
};

function make(): ReturnType<typeof createDocument> {
  const byPath: Record<string, Record<string, ZodOpenApiOperationObject>> = {};
  for (const operation of OPERATIONS)
    (byPath[operation.path] ??= {})[operation.method.toLowerCase()] = operationObject(operation);
  return createDocument({
    openapi: '3.1.1',
    info: { title: 'Wakeline', version: '1', description: DESCRIPTION },
    servers: [{ url: paths.api.v1('') }],
    paths: { ...byPath, ...FOR_LOGGERS },
    components: {
      securitySchemes: {
        token: {
          type: 'http',
          scheme: 'bearer',
          description: `A token of a person. Scopes: ${Object.entries(SCOPE_WORDS)
            .map(([scope, words]) => `\`${scope}\`: ${words}`)
            .join('; ')}`,
        },
        loggerToken: {
          type: 'http',
          scheme: 'bearer',
          description: 'The token of a logger, made on its page',
        },
      },
      parameters: {
        IdempotencyKey: {
          name: 'Idempotency-Key',
          in: 'header',
          required: false,
          description: `A key of your own for this request, as a UUID. It counts for ${KEY_HOURS} hours`,
          schema: { type: 'string', minLength: 1, maxLength: 255 },
        },
      },
      headers: {
        RateLimit: {
          description: 'What is left (`r`) and seconds until it is all there again (`t`)',
          schema: { type: 'string' },
          example: '"requests";r=598;t=42',
        },
        RateLimitPolicy: {
          description: 'Requests (`q`) in a window of seconds (`w`)',
          schema: { type: 'string' },
          example: `"requests";q=${API_LIMIT.requests};w=${API_LIMIT.windowS}`,
        },
        RetryAfter: { description: 'Seconds to wait', schema: { type: 'integer' } },
        ETag: { description: 'Names this answer, for If-None-Match', schema: { type: 'string' } },
      },
    },
  });
}

let made: ReturnType<typeof make> | undefined;
/** As JSON is sent of it; the same for everybody. */
export const openApiDocument = (): ReturnType<typeof make> => (made ??= make());
