import { afterEach, beforeEach, expect, it, vi } from 'vitest';
import { shareOrSaveFile } from '@/composables/shareOrSaveFile';

/** What a phone's browser offers; happy-dom has neither. */
const share = vi.fn<(data: ShareData) => Promise<void>>();
let canShare = true;
let isHandheld = true;
let saved: string[];
beforeEach(() => {
  [canShare, isHandheld, saved] = [true, true, []];
  share.mockReset().mockResolvedValue();
  Object.assign(navigator, { share, canShare: () => canShare });
  vi.spyOn(window, 'matchMedia').mockImplementation(
    (query) => ({ matches: isHandheld, media: query }) as MediaQueryList,
  );
  vi.spyOn(HTMLAnchorElement.prototype, 'click').mockImplementation(function (this: HTMLAnchorElement) {
    saved.push(this.download);
  });
});
afterEach(() => {
  Reflect.deleteProperty(navigator, 'share');
  Reflect.deleteProperty(navigator, 'canShare');
  vi.restoreAllMocks();
});
const give = () => shareOrSaveFile('swaymark-runs.json', '{}', 'application/json');

it('a phone that can share the file shares it, under its name, and saves nothing', async () => {
  await give();
  const [file] = share.mock.calls[0]![0].files!;
  expect([file!.name, file!.type, await file!.text()]).toEqual(['swaymark-runs.json', 'application/json', '{}']);
  expect(saved).toEqual([]);
});

it('a laptop, and a phone that cannot share such files, save it', async () => {
  isHandheld = false;
  await give();
  [isHandheld, canShare] = [true, false];
  await give();
  expect(saved).toEqual(['swaymark-runs.json', 'swaymark-runs.json']);
  expect(share).not.toHaveBeenCalled();
});

it('leaving the sharing sheet saves nothing; sharing that went wrong does', async () => {
  share.mockRejectedValueOnce(new DOMException('left', 'AbortError'));
  await give();
  expect(saved).toEqual([]);
  share.mockRejectedValueOnce(new DOMException('no', 'NotAllowedError'));
  await give();
  expect(saved).toEqual(['swaymark-runs.json']);
});
