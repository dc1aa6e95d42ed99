/** Everything that a joint solution is described from. */
import type { Observations } from '../../observations/photometry-types.js';
import type { Case } from '../../observations/types.js';
import type { TransitSearch } from './found-transit.js';
import type { JointSample } from './joint-posterior.js';
import type { SettledJoint } from './settle-joint.js';
import type { SettledVelocities } from './velocity-part.js';

export interface JointResult {
  readonly theCase: Case;
  readonly observations: Observations;
  readonly search: TransitSearch;
  readonly velocity: SettledVelocities | null;
  readonly settled: SettledJoint;
  readonly sample: JointSample;
  readonly epochBjdTdb: number;
}
