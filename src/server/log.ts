import pino from 'pino';

const level = process.env.LOG_LEVEL ?? (process.env.VITEST ? 'silent' : 'info');
export const log = pino({
  level,
  base: undefined,
  serializers: { error: pino.stdSerializers.err },
  redact: {
    paths: ['password', '*.password', 'token', '*.token', 'headers.cookie', 'headers.authorization'],
    censor: '…',
  },
});
