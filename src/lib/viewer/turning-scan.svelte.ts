/** The geometries of a scan, loaded when its section comes near the screen, and the shape at any angle. */
import type { Skeleton } from './internal-coordinates';
import { fetchPackedGeometries } from './packed-geometries';
import { createTurningGeometry, type Jump, type TurningGeometry } from './turning-geometry';

export interface ScanToTurn {
  readonly moleculeId: string;
  readonly skeleton: Skeleton;
  readonly scan: {
    readonly id: string;
    readonly torsion: readonly number[];
    readonly points: readonly { readonly angle: number }[];
    readonly stationary: readonly { readonly angle: number }[];
  };
}

/** A shape in the frame of the Newman projection; Å, 3N. The numbers are overwritten by the next one. */
export interface TurnedShape {
  readonly x: Float64Array;
  readonly angle: number;
}

export class TurningScan {
  #geometry = $state.raw<TurningGeometry | null>(null);
  #x: Float64Array = new Float64Array(0);
  failed = $state(false);

  /** Watches the element; to be made while a component is. */
  constructor(element: () => Element, wanted: () => ScanToTurn) {
    $effect(() => {
      const asked = wanted();
      this.#geometry = null;
      const observer = new IntersectionObserver(
        ([{ isIntersecting }]) => {
          if (!isIntersecting) return;
          observer.disconnect();
          this.#load(asked).catch(() => (this.failed = true));
        },
        { rootMargin: '100%' },
      );
      observer.observe(element());
      return () => observer.disconnect();
    });
  }

  async #load({ moleculeId, skeleton, scan }: ScanToTurn): Promise<void> {
    const atoms = skeleton.symbols.length;
    const geometries = await fetchPackedGeometries(moleculeId, scan.id, atoms);
    const knots = [...scan.points, ...scan.stationary].map(({ angle }, n) => ({
      angle,
      coordinates: geometries[n],
    }));
    const count = scan.points.length;
    this.#x = new Float64Array(3 * atoms);
    this.#geometry = createTurningGeometry(
      skeleton,
      scan.torsion,
      knots.slice(0, count),
      knots.slice(count),
    );
  }

  get jumps(): readonly Jump[] {
    return this.#geometry?.jumps ?? [];
  }

  /** The shape at an angle in degrees; null until the geometries are there. */
  shapeAt(angle: number): TurnedShape | null {
    if (!this.#geometry) return null;
    this.#geometry.at(angle, this.#x);
    return { x: this.#x, angle };
  }
}
