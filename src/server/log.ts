import pino from 'pino';
import { currentRequest } from './request';

const level = process.env.LOG_LEVEL ?? (process.env.VITEST ? 'silent' : 'info');
export const log = pino({
  level,
  base: undefined,
  mixin: () => {
    const request = currentRequest();
    return request ? { requestId: request.requestId } : {};
  },
  serializers: { error: pino.stdSerializers.err },
  redact: {
    paths: ['password', '*.password', 'token', '*.token', 'headers.cookie', 'headers.authorization'],
    censor: '…',
  },
});
