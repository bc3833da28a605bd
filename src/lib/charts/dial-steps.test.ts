import { describe, expect, it } from 'vitest';
import { drawnTo, keyTarget, nextGridAngle, nextOf } from './dial-steps';

describe('turning by keys', () => {
  const stops = [-65, 0, 65, 120, 180, -120];
  const press = (key: string, angle: number, shiftKey = false) =>
    keyTarget({ key, shiftKey }, { angle, step: 15, stops });

  it.each([
    ['ArrowRight', 60, 75],
    ['ArrowUp', 62.3, 75],
    ['ArrowLeft', 60, 45],
    ['ArrowDown', 62.3, 60],
    ['ArrowRight', 180, -165],
    ['ArrowLeft', -165, 180],
    ['PageUp', 60, 105],
    ['PageDown', -165, 150],
    ['Home', 60, 0],
    ['End', 60, 65],
    ['End', 180, -120],
    ['Home', -120, 180],
  ])('%s at %d goes to %d', (key, from, to) => expect(press(key, from)).toBe(to));

  it('takes larger steps with shift, and leaves other keys alone', () => {
    expect(press('ArrowRight', 0, true)).toBe(45);
    expect(press('Tab', 0)).toBeNull();
  });

  it('goes round the whole grid and comes back', () => {
    let angle = 180;
    for (let n = 0; n < 24; n++) angle = nextGridAngle(angle, 15, 1);
    expect(angle).toBe(180);
  });

  it('stays where there is nowhere else to go', () => {
    expect(nextOf([], 12, 1)).toBe(12);
    expect(nextOf([12], 12, 1)).toBe(12);
  });
});

describe('turning by pointer', () => {
  it('is drawn to a stationary point nearby, over the seam too', () => {
    expect(drawnTo([180], -179)).toBe(180);
    expect(drawnTo([180], -177)).toBe(-177);
  });
});
