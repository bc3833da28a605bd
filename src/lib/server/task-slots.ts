/** The places of a worker at which it takes one task after the other; they can be closed and opened again. */
import { log } from './log';

/** One place: opening begins to take tasks, closing waits for the task it is on. */
export interface Slot {
  readonly open: () => Promise<string>;
  readonly close: (id: string) => Promise<void>;
}

export interface Slots {
  /** Takes tasks from now on. */
  readonly take: () => void;
  /** Takes no more; what is running goes on. Resolves once nothing runs. */
  readonly pause: () => Promise<void>;
}

/** Brings one place to what is wanted of it, step by step: the wish may change while a step takes long. */
function keepSlot({ open, close }: Slot) {
  let id: string | null = null;
  let wanted = false;
  let moving: Promise<void> | null = null;
  const isAsWanted = () => (id !== null) === wanted;
  const move = async () => {
    while (!isAsWanted()) {
      if (id === null) {
        id = await open();
      } else {
        await close(id);
        id = null;
      }
    }
  };
  const settle = async (): Promise<void> => {
    while (!isAsWanted()) {
      moving ??= move().finally(() => (moving = null));
      await moving;
    }
  };
  return (isWanted: boolean) => {
    wanted = isWanted;
    return settle();
  };
}

/** Keeps a number of places, all closed at first. */
export function keepSlots(count: number, slot: Slot): Slots {
  const slots = Array.from({ length: count }, () => keepSlot(slot));
  return {
    take: () => {
      for (const set of slots) {
        set(true).catch((error: unknown) =>
          log.warn({ error }, 'Taking tasks could not begin; it is tried again'),
        );
      }
    },
    pause: async () => {
      await Promise.all(slots.map((set) => set(false)));
    },
  };
}

/** Places of several queues as if they were one. */
export function joinSlots(several: readonly Slots[]): Slots {
  return {
    take: () => {
      for (const slots of several) slots.take();
    },
    pause: async () => {
      await Promise.all(several.map((slots) => slots.pause()));
    },
  };
}
