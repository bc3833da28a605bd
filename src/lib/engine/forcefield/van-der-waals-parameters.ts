/** Van der Waals combination rules (Halgren, J. Am. Chem. Soc. 1992, 114, 7827; J. Comput. Chem. 1996, 17, 520). */
import type { VanDerWaalsParameters } from './parameters';

/** Constants of the combination rules (part II, equations 9 to 14). */
const POWER = 0.25;
const B = 0.2;
const BETA = 12;
const DONOR_ACCEPTOR_RADIUS = 0.8;
const DONOR_ACCEPTOR_DEPTH = 0.5;
/** 181.16 kcal/mol Å⁶ with polarizabilities in Å³ and Slater-Kirkwood electron numbers. */
const SLATER_KIRKWOOD = 181.16;

/** Minimum-energy distance in Å and well depth in kcal/mol of a pair of types. */
export function combineVanDerWaals(
  i: VanDerWaalsParameters,
  j: VanDerWaalsParameters,
): { radius: number; depth: number } {
  const radiusI = i.scaleA * Math.pow(i.polarizability, POWER);
  const radiusJ = j.scaleA * Math.pow(j.polarizability, POWER);
  const skew = (radiusI - radiusJ) / (radiusI + radiusJ);
  const stretch = i.donor || j.donor ? 0 : B * (1 - Math.exp(-BETA * skew * skew));
  const radius = 0.5 * (radiusI + radiusJ) * (1 + stretch);
  const depth =
    (SLATER_KIRKWOOD * i.scaleG * j.scaleG * i.polarizability * j.polarizability) /
    (Math.sqrt(i.polarizability / i.effectiveElectrons) +
      Math.sqrt(j.polarizability / j.effectiveElectrons)) /
    Math.pow(radius, 6);
  const isHydrogenBond = (i.donor && j.acceptor) || (i.acceptor && j.donor);
  return isHydrogenBond
    ? { radius: DONOR_ACCEPTOR_RADIUS * radius, depth: DONOR_ACCEPTOR_DEPTH * depth }
    : { radius, depth };
}
