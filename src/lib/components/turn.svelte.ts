/** The angle to which a bond is turned: where it is asked to stand, and where it stands while it glides there. */
import { prefersReducedMotion, Tween } from 'svelte/motion';
import { cubicOut } from 'svelte/easing';
import { turnBetween, wrapDegrees } from '$lib/engine/light';

/** Milliseconds to a new angle. */
const GLIDE = 220;

export class Turn {
  /** Not brought into one turn, so that gliding takes the shorter way. */
  readonly #degrees: Tween<number>;

  constructor(angle: number) {
    this.#degrees = new Tween(angle, { easing: cubicOut });
  }

  /** Where the bond is asked to stand, degrees in (-180, 180]. */
  get angle(): number {
    return wrapDegrees(this.#degrees.target);
  }

  /** Where it stands at this moment. */
  get shown(): number {
    return wrapDegrees(this.#degrees.current);
  }

  /** Turns to an angle, at once or gliding; those who prefer less motion see no glide. */
  to(angle: number, isGliding: boolean): void {
    const target = this.#degrees.target + turnBetween(this.#degrees.target, angle);
    const duration = isGliding && !prefersReducedMotion.current ? GLIDE : 0;
    void this.#degrees.set(target, { duration });
  }
}
