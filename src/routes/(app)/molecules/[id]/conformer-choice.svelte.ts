/** Which conformers are shown, each with a color that stays its own while it is shown. */

/** A conformer in the 3-D view. */
export interface ShownConformer {
  readonly rank: number;
  /** Number of its color. */
  readonly color: number;
}

export class ConformerChoice {
  /** Lowest first. */
  shown = $state.raw<readonly ShownConformer[]>([{ rank: 0, color: 0 }]);

  /** The color of a conformer, null where it is not shown. */
  colorOf(rank: number): number | null {
    return this.shown.find((conformer) => conformer.rank === rank)?.color ?? null;
  }

  /** Shows a conformer that is hidden and hides one that is shown. */
  toggle(rank: number): void {
    if (this.colorOf(rank) !== null) {
      this.shown = this.shown.filter((conformer) => conformer.rank !== rank);
      return;
    }
    let color = 0;
    while (this.shown.some((conformer) => conformer.color === color)) color++;
    this.shown = [...this.shown, { rank, color }].sort((a, b) => a.rank - b.rank);
  }

  /** Shows these and no others. */
  show(ranks: readonly number[]): void {
    this.shown = ranks.map((rank, color) => ({ rank, color }));
  }
}
