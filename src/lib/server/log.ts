/** The process's log: one JSON object a line. */
import { pino } from 'pino';
import { environment } from './environment';

export const log = pino({
  level: environment.WINDLASS_LOG_LEVEL,
  serializers: { error: pino.stdSerializers.err },
});
