import { afterEach, beforeEach, expect, it, vi } from 'vitest';
import { RECORDING_LOCK } from '@/sync/recordingLock';
import { locksOfOneBrowser } from '../support/locksOfOneBrowser';
import { eventually } from '../../support/eventually';

/** A tab, with the worker's registration as vite-plugin-pwa calls it. */
async function openTab() {
  vi.resetModules();
  const { beginAppUpdate, useAppUpdate } = await import('@/composables/useAppUpdate');
  const reload = vi.fn();
  const takeOver = vi.fn(() => Promise.resolve());
  let heard = { onNeedRefresh: () => undefined as unknown, onNeedReload: () => undefined as unknown };
  beginAppUpdate((options) => {
    heard = options;
    return takeOver;
  }, reload);
  return { ...useAppUpdate(reload), reload, takeOver, heard };
}

beforeEach(() => {
  Object.defineProperty(navigator, 'locks', { value: locksOfOneBrowser(), configurable: true });
});
afterEach(() => void vi.restoreAllMocks());

it('R19: a tab whose neighbour took the new version is told, and never reloaded', async () => {
  const tab = await openTab();
  tab.heard.onNeedRefresh();
  expect(tab.standing.value).toBe('waiting');
  tab.heard.onNeedReload();
  expect(tab.standing.value).toBe('replaced');
  expect(tab.reload).not.toHaveBeenCalled();
});

it('R19: a new version is not taken while any tab times a run', async () => {
  const tab = await openTab();
  tab.heard.onNeedRefresh();
  let stopTiming: () => void = () => undefined;
  void navigator.locks.request(RECORDING_LOCK, () => new Promise<void>((resolve) => (stopTiming = resolve)));
  await Promise.resolve();

  expect(await tab.accept()).toBe(false);
  expect(tab.takeOver).not.toHaveBeenCalled();

  stopTiming();
  await eventually(async () => expect(await tab.accept()).toBe(true));
  expect(tab.takeOver).toHaveBeenCalledTimes(1);
});

it('the tab that took the new version loads it once it is in force', async () => {
  const tab = await openTab();
  tab.heard.onNeedRefresh();
  await tab.accept();
  expect(tab.reload).not.toHaveBeenCalled();
  tab.heard.onNeedReload();
  expect(tab.reload).toHaveBeenCalledTimes(1);
});
