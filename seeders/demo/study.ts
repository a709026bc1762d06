import { workingCriteria } from '../library/criteria-sets';
import { listCriteriaSets } from '../../src/lib/server/services/criteria-sets';
import {
  calibrationNgPerMl,
  levelLabel,
  simulateCalibration,
  simulateExperiment,
  standardNg,
  standardNgPerMl
} from './generator';
import { demoExperiments, spikeNg, surrogateNg } from './experiments';
import type { SeededLab } from './labs';
import { demoPanel, demoRecovered } from './panel';
import type { PlannedExperiment } from './planned';
import { demoVariants } from './procedures';
import { sampleVolumeMl } from './truth';
import { upload } from './upload';
import { writeWorkbook } from './workbooks';
