import { LRUCache } from 'lru-cache';
import { runningTransaction } from '../../db/transaction';
import { NotFound } from '../../errors';
import { findStudy, readStudy } from './read-study';
import { studyFigures, type StudyFigures } from './study-figures';

/** Weight of a study in the cache: its numbers, and something for the rest. */
const weightOf = (figures: StudyFigures): number =>
  1000 + figures.data.experiments.reduce((sum, item) => sum + item.reported.length, 0);

/** Figures by study, for as long as the study's data stay as they are. */
const kept = new LRUCache<string, StudyFigures>({ max: 200, maxSize: 1_000_000, sizeCalculation: weightOf });
const underWay = new Map<string, Promise<StudyFigures>>();

/**
 * The figures of a study, from the cache while its data version stays the same.
 * @throws NotFound when the lab has no study of this code
 */
export async function figuresOfStudy(labId: string, code: string): Promise<StudyFigures> {
  const found = await findStudy(labId, code);
  if (!found) throw new NotFound();
  // Inside a transaction that writes, the data are ahead of their version.
  if (runningTransaction()) return studyFigures(await readStudy(labId, found.id));

  const cached = kept.get(keyOf(found));
  if (cached) return cached;
  const running = underWay.get(keyOf(found));
  if (running) return running;
  const made = readStudy(labId, found.id).then((data) => {
    const figures = studyFigures(data);
    kept.set(keyOf(data), figures);
    return figures;
  });
  underWay.set(keyOf(found), made);
  try {
    return await made;
  } finally {
    underWay.delete(keyOf(found));
  }
}

const keyOf = (study: { readonly id: string; readonly dataVersion: number }): string =>
  `${study.id} ${study.dataVersion}`;
