import type { EnergyUnit } from '$lib/domain/energy-units';
import type { Missing } from '$lib/domain/sign-in-strength';
import type { Proof } from '$lib/server/sessions';
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
      /** The sign-in of this browser that waits for the code of a second factor. */
      stepId: string | null;
      /** How and when the person proved who they are; null for a visitor. */
      proof: Proof | null;
      /** The chosen team when it asks for more than this sign-in showed; then `membership` is null. */
      barred: { readonly membership: Membership; readonly missing: Missing } | null;
      /** Every team the person belongs to, by name. */
      memberships: readonly Membership[];
      /** The chosen team: who asks, for every query. Null for a visitor, a person without a team, or one who is barred. */
      membership: Membership | null;
    }
  }
}
