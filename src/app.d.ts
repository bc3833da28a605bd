import type { EnergyUnit } from '$lib/domain/energy-units';
import type { Membership } from '$lib/server/teams';

declare global {
  namespace App {
    interface Error {
      message: string;
      /** Names the line in the server's log that belongs to what nobody foresaw. */
      errorId?: string;
    }

    interface Locals {
      /** Who is signed in; null for a visitor. Pages under (app) are only reached with someone here. */
      user: {
        readonly id: string;
        readonly email: string;
        readonly name: string;
        readonly energyUnit: EnergyUnit;
        readonly isOperator: boolean;
      } | null;
      /** The sign-in this request belongs to. */
      sessionId: string | null;
      /** Every team the person belongs to, by name. */
      memberships: readonly Membership[];
      /** The chosen team: who asks, for every query. Null only for a visitor or a person without a team. */
      membership: Membership | null;
    }
  }
}
