/** The orbit's room: Kepler's equation, geometry, conversions, masses, surroundings, constants. */
export type { OrbitElements } from './elements.js';

export {
  AU_IN_SOLAR_RADII,
  AU_M,
  DAYS_PER_YEAR,
  GM_EARTH_M3_S2,
  GM_JUPITER_M3_S2,
  GM_SUN_M3_S2,
  GRAVITATIONAL_CONSTANT,
  JUPITER_MASS_IN_EARTH,
  L_SUN_W,
  RAD_PER_DEG,
  R_EARTH_M,
  R_JUPITER_M,
  R_SUN_M,
  SECONDS_PER_DAY,
  SOLAR_MASS_IN_EARTH,
  SOLAR_MASS_IN_JUPITER,
  SOLAR_RADIUS_IN_JUPITER,
  SPEED_OF_LIGHT_MPS,
  TEFF_SUN_K,
  TWO_PI,
} from './constants.js';

export { normaliseDegrees, normaliseRadians, reduceAngleRad } from './angles.js';
export { solveKepler, trueAnomaly } from './kepler.js';
export { solveKeplerArray } from './kepler-array.js';
export {
  eccentricFromTrueAnomaly,
  meanFromEccentricAnomaly,
  meanFromTrueAnomaly,
  trueFromEccentricAnomaly,
} from './anomalies.js';

export {
  conjunctionDelayDays,
  inferiorConjunctionFromPeriastron,
  meanAnomalyAt,
  meanLongitudeAtEpoch,
  nearestPassage,
  nextPassage,
  periastronFromInferiorConjunction,
  periastronFromMeanLongitude,
} from './conversions.js';
export type { OrbitShape } from './conversions.js';

export {
  apastronDistanceAu,
  apastronSpeedKmps,
  areaSwept,
  bodiesAboutBarycentre,
  equalTimeSectors,
  focusDistanceAu,
  periastronDistanceAu,
  periastronSpeedKmps,
  positionAtTrueAnomaly,
  positionInOrbit,
  semiMinorAxisAu,
  speedAtDistanceKmps,
  timeBetweenDays,
  timeFromPeriastronDays,
  trueAnomalyAfterPeriastron,
} from './geometry.js';
export type { PlanePoint } from './geometry.js';

export {
  companionMassSolar,
  massFunctionSolar,
  relativeSemiMajorAxisAu,
  semiAmplitudeMps,
  starOrbitSemiMajorAxisAu,
} from './masses.js';
export type { VelocityAmplitude } from './masses.js';

export {
  astrometricSignatureMicroarcsec,
  centralTransitDurationHours,
  equilibriumTemperatureK,
  hillRadiusAu,
  irradiationEarth,
  mutualHillSpacing,
  nearPeriodRatio,
  transitDepthPpm,
  transitProbability,
} from './environment.js';
export type { Irradiated, Neighbour, TransitGeometry } from './environment.js';

export {
  fullDurationDays,
  inclinationFromImpactParameterRad,
  occultationDistance,
  occultationImpactParameter,
  occultationPhase,
  totalDurationDays,
  transitDistance,
  transitImpactParameter,
} from './transit-geometry.js';
export type { ScaledOrbit, TiltedOrbit } from './transit-geometry.js';
export { occultationContacts, transitContacts } from './contact-times.js';
export type { ContactTimes, CrossingOrbit } from './contact-times.js';
export {
  meanDensityGramsPerCm3,
  scaledSemiMajorAxisFromDensity,
  starDensityGramsPerCm3,
} from './star-density.js';
export { solveTransitShape, surfaceGravityMps2 } from './transit-shape.js';
export type { MeasuredShape, ShapeSolution } from './transit-shape.js';
export {
  isPhysicalLimbDarkening,
  limbDarkeningFromTriangle,
  triangleFromLimbDarkening,
} from './limb-darkening.js';
export type { QuadraticLimbDarkening, TriangleSample } from './limb-darkening.js';
export {
  apparentPeriodChange,
  occultationLightDelayDays,
  starRadiusLightDays,
  starRoemerAmplitudeDays,
} from './light-time.js';
