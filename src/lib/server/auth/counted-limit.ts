import { RateLimiterPostgres, RateLimiterRes } from 'rate-limiter-flexible';
import { sequelize } from '../db/sequelize';
import { TooManyRequests } from '../errors';

/** A limit kept in the table `attempt_limits`, so that it holds over all processes that share the database. */
export function countedLimit(
  prefix: string,
  { points, seconds }: Readonly<{ points: number; seconds: number }>
): RateLimiterPostgres {
  return new RateLimiterPostgres({
    storeClient: sequelize,
    storeType: 'sequelize',
    tableName: 'attempt_limits',
    // The migrations made it.
    tableCreated: true,
    clearExpiredByTimeout: false,
    keyPrefix: prefix,
    points,
    duration: seconds
  });
}

/** Takes one point. @throws TooManyRequests with the seconds to wait, once none is left */
export async function spendPoint(
  limit: RateLimiterPostgres,
  key: string,
  tooMany?: (seconds: number) => string
): Promise<void> {
  try {
    await limit.consume(key);
  } catch (refusal) {
    if (!(refusal instanceof RateLimiterRes)) throw refusal;
    const seconds = Math.max(1, Math.ceil(refusal.msBeforeNext / 1000));
    throw new TooManyRequests(seconds, tooMany?.(seconds));
  }
}
