import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { effectScope, ref, type EffectScope } from 'vue';
import { PALM_PX, useTapInput } from '@/composables/useTapInput';

let scope: EffectScope;
let pad: HTMLElement;
const target = { tap: vi.fn(), reject: vi.fn(), undo: vi.fn(), missed: vi.fn() };

beforeEach(() => {
  Object.values(target).forEach((spy) => spy.mockReset());
  pad = document.createElement('button');
  scope = effectScope();
  scope.run(() => useTapInput(ref(pad), target));
});
afterEach(() => scope.stop());

/** An event as the browser makes it from an input: with a time of its own, and trusted. */
function send(name: string, at_ms: number, facts: object = {}) {
  const event = new Event(name, { cancelable: true });
  const trusted = {
    isTrusted: true,
    timeStamp: at_ms,
    pointerType: 'touch',
    width: 20,
    height: 20,
    button: 0,
    ...facts,
  };
  for (const [key, fact] of Object.entries(trusted)) Object.defineProperty(event, key, { value: fact });
  pad.dispatchEvent(event);
  return event;
}

describe('useTapInput', () => {
  it.each([
    ['touch', 'touch'],
    ['pen', 'pen'],
    ['mouse', 'mouse'],
  ])('takes a %s contact at the time of the input', (pointerType, input) => {
    send('pointerdown', 1234.5, { pointerType });
    expect(target.tap.mock.calls).toEqual([[1234.5, input]]);
  });

  it('takes a second finger like the first', () => {
    send('pointerdown', 1000, { isPrimary: true });
    send('pointerdown', 3000, { isPrimary: false });
    expect(target.tap).toHaveBeenCalledTimes(2);
  });

  it('rejects a palm, and logs it', () => {
    send('pointerdown', 1000, { width: PALM_PX, height: 30 });
    expect(target.reject.mock.calls).toEqual([[1000, 'palm']]);
    expect(target.tap).not.toHaveBeenCalled();
  });

  it('leaves the other mouse buttons alone', () => {
    send('pointerdown', 1000, { pointerType: 'mouse', button: 2 });
    expect(target.tap).not.toHaveBeenCalled();
    expect(target.reject).not.toHaveBeenCalled();
  });

  it('rejects what a script made', () => {
    send('pointerdown', 1000, { isTrusted: false });
    expect(target.reject.mock.calls).toEqual([[1000, 'untrusted']]);
  });

  it.each([' ', 'Enter', 'PageDown'])('takes the key %j once, and logs its repeats', (key) => {
    send('keydown', 1000, { key, repeat: false });
    const repeated = send('keydown', 1500, { key, repeat: true });
    expect(target.tap.mock.calls).toEqual([[1000, 'key']]);
    expect(target.reject.mock.calls).toEqual([[1500, 'key_repeat']]);
    expect(repeated.defaultPrevented).toBe(true);
  });

  it('undoes with U and notes a missed one with M', () => {
    send('keydown', 1000, { key: 'u', repeat: false });
    send('keydown', 1100, { key: 'M', repeat: false });
    expect(target.undo.mock.calls).toEqual([[1000]]);
    expect(target.missed.mock.calls).toEqual([[1100]]);
  });

  it('leaves other keys and key combinations to the browser', () => {
    expect(send('keydown', 1000, { key: 'Tab', repeat: false }).defaultPrevented).toBe(false);
    expect(send('keydown', 1000, { key: 'u', ctrlKey: true, repeat: false }).defaultPrevented).toBe(false);
    expect(target.undo).not.toHaveBeenCalled();
  });

  it('takes a click that no finger or key made as a screen reader’s', () => {
    send('click', 5000);
    expect(target.tap.mock.calls).toEqual([[5000, 'assistive']]);
  });

  it('does not take the click of a finger or a key a second time', () => {
    send('pointerdown', 1000);
    send('click', 1090);
    send('keydown', 4000, { key: ' ', repeat: false });
    send('keyup', 4090, { key: ' ' });
    send('click', 4091);
    expect(target.tap).toHaveBeenCalledTimes(2);
  });

  it('keeps the long-press menu away', () => {
    expect(send('contextmenu', 1000).defaultPrevented).toBe(true);
  });
});
