import { AstroTime, BaryState, Body, Rotation_EQD_EQJ, RotateVector, SiderealTime, Vector } from 'astronomy-engine';
import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';

/** Where and when a spectrum was taken, and of what. */
export interface Sighting {
  /** ICRS degrees. */
  raDegrees: number;
  decDegrees: number;
  /** Mid-exposure, Julian date on the UTC scale. */
  julianDateUtc: number;
  /** Geocentric ITRS position of the telescope, metres; null leaves out the Earth's rotation (at most 0.47 km/s). */
  observatoryMetres: readonly [number, number, number] | null;
}

/** Kilometres in an astronomical unit (IAU 2012 resolution B2, exact). */
const AU_KM = 149_597_870.7;
const SECONDS_A_DAY = 86_400;
/** Angular velocity of the Earth, radian a second (IERS Conventions 2010, table 1.2). */
const EARTH_ROTATION = 7.292115e-5;
/** Heliocentric and geocentric gravitational constants, km³/s² (IAU 2015 resolution B3, nominal). */
const SUN_GM = 1.3271244e11;
const EARTH_GM = 3.986004e5;
const EARTH_RADIUS_KM = 6378.1;

interface State {
  position: [number, number, number];
  velocity: [number, number, number];
}

/** Barycentric state of a body in km and km/s, ICRS axes. */
function barycentricState(body: Body, time: AstroTime): State {
  const state = BaryState(body, time);
  const perSecond = AU_KM / SECONDS_A_DAY;
  return {
    position: [state.x * AU_KM, state.y * AU_KM, state.z * AU_KM],
    velocity: [state.vx * perSecond, state.vy * perSecond, state.vz * perSecond],
  };
}

/** Velocity of a place on Earth that the rotation gives it, km/s, ICRS axes: omega x r, turned from date to J2000. */
function rotationVelocity(metres: readonly [number, number, number], time: AstroTime): [number, number, number] {
  const angle = (SiderealTime(time) * Math.PI) / 12;
  const x = (metres[0] * Math.cos(angle) - metres[1] * Math.sin(angle)) / 1000;
  const y = (metres[0] * Math.sin(angle) + metres[1] * Math.cos(angle)) / 1000;
  const ofDate = new Vector(-EARTH_ROTATION * y, EARTH_ROTATION * x, 0, time);
  const turned = RotateVector(Rotation_EQD_EQJ(time), ofDate);
  return [turned.x, turned.y, turned.z];
}

function direction(raDegrees: number, decDegrees: number): [number, number, number] {
  const ra = (raDegrees * Math.PI) / 180;
  const dec = (decDegrees * Math.PI) / 180;
  return [Math.cos(dec) * Math.cos(ra), Math.cos(dec) * Math.sin(ra), Math.sin(dec)];
}

function dot(a: readonly number[], b: readonly number[]): number {
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

function toTime(julianDateUtc: number): AstroTime {
  return new AstroTime(julianDateUtc - 2_451_545);
}

/**
 * Barycentric correction of a measured redshift, as a velocity v in km/s to be used by multiplication:
 * 1 + z_barycentric = (1 + z_measured)(1 + v / c); positive when the observer moves towards the target.
 *
 * 1 + v / c = gamma (1 + beta · k)(1 + GM_sun / (c² r) + GM_earth / (c² R)), with beta the observer's barycentric
 * velocity over c and k the direction of the target. Parallax, proper motion and Shapiro delay are left out (together
 * below 0.1 m/s for anything beyond the Galaxy's nearest stars).
 *
 * Source: Wright and Eastman (2014, PASP 126, 838), equation 28; positions by VSOP87 as in the package.
 *
 * @throws nothing; a date outside the ephemeris only loses accuracy.
 */
export function barycentricVelocityKms(sighting: Sighting): number {
  const time = toTime(sighting.julianDateUtc);
  const earth = barycentricState(Body.Earth, time);
  const sun = barycentricState(Body.Sun, time);
  const spin = sighting.observatoryMetres ? rotationVelocity(sighting.observatoryMetres, time) : [0, 0, 0];
  const velocity = earth.velocity.map((component, i) => component + spin[i]);
  const beta = dot(velocity, direction(sighting.raDegrees, sighting.decDegrees)) / SPEED_OF_LIGHT_KMS;
  const betaSquared = dot(velocity, velocity) / SPEED_OF_LIGHT_KMS ** 2;
  const sunDistance = Math.hypot(...earth.position.map((component, i) => component - sun.position[i]));
  const radius = sighting.observatoryMetres ? Math.hypot(...sighting.observatoryMetres) / 1000 : EARTH_RADIUS_KM;
  const potential = (SUN_GM / sunDistance + EARTH_GM / radius) / SPEED_OF_LIGHT_KMS ** 2;
  return SPEED_OF_LIGHT_KMS * (((1 + beta) / Math.sqrt(1 - betaSquared)) * (1 + potential) - 1);
}

/**
 * What to add to a heliocentric velocity to make it barycentric, km/s: the Sun's own barycentric velocity towards the
 * target, at most 0.02 km/s. Heliocentric values are taken as a plain projection, as is common practice.
 */
export function heliocentricToBarycentricKms(sighting: Omit<Sighting, 'observatoryMetres'>): number {
  const sun = barycentricState(Body.Sun, toTime(sighting.julianDateUtc));
  return dot(sun.velocity, direction(sighting.raDegrees, sighting.decDegrees));
}

/**
 * Heliocentric correction as a plain projection, km/s: the observer's velocity about the Sun towards the target.
 * It serves comparison with older tables; spectra are made barycentric.
 */
export function heliocentricVelocityKms(sighting: Sighting): number {
  const time = toTime(sighting.julianDateUtc);
  const earth = barycentricState(Body.Earth, time).velocity;
  const sun = barycentricState(Body.Sun, time).velocity;
  const spin = sighting.observatoryMetres ? rotationVelocity(sighting.observatoryMetres, time) : [0, 0, 0];
  const about = earth.map((component, i) => component - sun[i] + spin[i]);
  return dot(about, direction(sighting.raDegrees, sighting.decDegrees));
}
