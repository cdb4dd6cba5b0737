import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { effectScope, type EffectScope } from 'vue';
import { usePageEvents } from '@/composables/usePageEvents';

let scope: EffectScope;
const tell = vi.fn();

beforeEach(() => {
  tell.mockReset();
  scope = effectScope();
  scope.run(() => usePageEvents(tell));
});
afterEach(() => {
  scope.stop();
  vi.restoreAllMocks();
});

describe('usePageEvents', () => {
  it.each([
    ['hidden', 'hidden'],
    ['visible', 'shown'],
  ])('tells that the page became %s, at the time of the event', (state, what) => {
    vi.spyOn(document, 'visibilityState', 'get').mockReturnValue(state as DocumentVisibilityState);
    const event = new Event('visibilitychange');
    document.dispatchEvent(event);
    expect(tell.mock.calls).toEqual([[event.timeStamp, what]]);
  });

  it.each([
    ['freeze', 'frozen'],
    ['resume', 'resumed'],
  ])('tells of %s', (name, what) => {
    document.dispatchEvent(new Event(name));
    expect(tell.mock.calls.map(([, told]) => told)).toEqual([what]);
  });

  it('tells that the page is on its way out', () => {
    window.dispatchEvent(new Event('pagehide'));
    expect(tell.mock.calls.map(([, told]) => told)).toEqual(['page_hidden']);
  });

  it('tells nothing once it is over', () => {
    scope.stop();
    document.dispatchEvent(new Event('freeze'));
    expect(tell).not.toHaveBeenCalled();
  });
});
