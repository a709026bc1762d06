import { countedLimit, spendPoint } from './counted-limit';
import { subscriberOf } from './attempts';

/** A program that reads a study figure by figure stays below; one that runs away does not. */
const perKey = { points: 600, seconds: 60 } as const;

/** A program whose key has ended asks on and on; it may not keep the database busy with that. */
const wrongPerAddress = { points: 60, seconds: 15 * 60 } as const;

/** Counts a request of a key that works. @throws TooManyRequests */
export async function spendKeyRequest(keyId: string): Promise<void> {
  await spendPoint(
    countedLimit('access-key', perKey),
    keyId,
    (seconds) =>
      `This access key made more than ${perKey.points} requests within a minute. Go on in ${seconds} s.`
  );
}

/** Counts a request whose key does not work, by the network address it came from. @throws TooManyRequests */
export async function spendWrongKey(address: string): Promise<void> {
  await spendPoint(countedLimit('wrong-access-key', wrongPerAddress), subscriberOf(address));
}
