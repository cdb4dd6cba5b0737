import { mount } from '@vue/test-utils';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { defineComponent, h } from 'vue';
import { HOLD_MS, SECOND_PRESS_MS, useHoldToStop } from '@/composables/useHoldToStop';

function button() {
  const stop = vi.fn();
  let hold!: ReturnType<typeof useHoldToStop>;
  const wrapper = mount(
    defineComponent(() => {
      hold = useHoldToStop(stop);
      return () =>
        h(
          'button',
          Object.fromEntries(
            Object.entries(hold.on).map(([name, act]) => [`on${name[0]!.toUpperCase()}${name.slice(1)}`, act]),
          ),
        );
    }),
  );
  const send = (name: string, init: object = {}) => wrapper.element.dispatchEvent(Object.assign(new Event(name), init));
  return { stop, hold, send };
}

beforeEach(() => vi.useFakeTimers());
afterEach(() => vi.useRealTimers());

describe('useHoldToStop', () => {
  it('stops once it was held for 0.8 s, not before', () => {
    const { stop, send } = button();
    send('pointerdown', { pointerType: 'touch' });
    vi.advanceTimersByTime(HOLD_MS - 1);
    expect(stop).not.toHaveBeenCalled();
    vi.advanceTimersByTime(1);
    expect(stop).toHaveBeenCalledOnce();
  });

  it.each(['pointerleave', 'pointercancel'])('is taken back by %s, and asks nothing', (name) => {
    const { stop, hold, send } = button();
    send('pointerdown', { pointerType: 'touch' });
    vi.advanceTimersByTime(HOLD_MS / 2);
    send(name);
    vi.advanceTimersByTime(HOLD_MS);
    expect(stop).not.toHaveBeenCalled();
    expect(hold.isAsking.value).toBe(false);
  });

  it('asks after a short press, and forgets it after 3 s', () => {
    const { stop, hold, send } = button();
    send('pointerdown', { pointerType: 'touch' });
    send('pointerup');
    send('click', { detail: 1 });
    expect(hold.isAsking.value).toBe(true);
    vi.advanceTimersByTime(SECOND_PRESS_MS);
    expect(hold.isAsking.value).toBe(false);
    expect(stop).not.toHaveBeenCalled();
  });

  it('does not stop on two pointer presses in the same place', () => {
    const { stop, hold, send } = button();
    send('click', { detail: 1 });
    send('click', { detail: 2 });
    expect(stop).not.toHaveBeenCalled();
    hold.confirm();
    expect(stop).toHaveBeenCalledOnce();
  });

  it('stops on two key presses within 3 s', () => {
    const { stop, send } = button();
    send('click', { detail: 0 });
    vi.advanceTimersByTime(SECOND_PRESS_MS - 1);
    expect(stop).not.toHaveBeenCalled();
    send('click', { detail: 0 });
    expect(stop).toHaveBeenCalledOnce();
  });

  it('does not let a key held down press twice', () => {
    const { hold } = button();
    const repeated = Object.assign(new Event('keydown', { cancelable: true }), { repeat: true });
    hold.on.keydown(repeated as unknown as KeyboardEvent);
    expect(repeated.defaultPrevented).toBe(true);
  });
});
