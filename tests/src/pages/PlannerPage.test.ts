import 'fake-indexeddb/auto';
import { flushPromises, type VueWrapper } from '@vue/test-utils';
import { afterEach, describe, expect, it, vi } from 'vitest';
import PlannerPage from '@/pages/PlannerPage.vue';
import { mountApp } from '../support/mountApp';
import { json, plugIn } from '../support/network';

let wrapper: VueWrapper;
afterEach(() => {
  wrapper.unmount();
  vi.useRealTimers();
});

async function open() {
  vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout'] });
  plugIn(() => json({ me: null }));
  wrapper = mountApp(PlannerPage).wrapper;
  await flushPromises();
  const field = (label: string) => {
    const found = wrapper.findAll('label').find((candidate) => candidate.text() === label);
    if (!found) throw new Error(`no field is labelled ${label}`);
    return wrapper.find(`[id="${found.attributes('for')}"]`);
  };
  const settle = async () => {
    vi.advanceTimersByTime(1000);
    await flushPromises();
  };
  const type = async (label: string, text: string) => {
    await field(label).setValue(text);
    await field(label).trigger('focusout');
    await settle();
  };
  const choose = async (choice: string) => {
    await wrapper.find(`input[type="radio"][value="${choice}"]`).setValue();
    await settle();
  };
  const verdict = () => wrapper.find('section[aria-label="Verdict"]').text().replaceAll('\u00a0', ' ');
  return { type, choose, verdict, field };
}

describe('PlannerPage', () => {
  it('says of the usual plan that 24 swings are enough for 0.1 % of T₀', async () => {
    // σ√(12/(n(n+1)(n+2))) = 0.001 × 2 s with σ = 70 ms gives n = 24 (tests/reference/hand-timing.json).
    const { verdict } = await open();
    expect(verdict()).toContain('Not there yet');
    expect(verdict()).toContain('T₀ comes out to 0.13 %; 0.10 % is wanted.');
    expect(verdict()).toContain('24 swings a run are enough.');
  });

  it('says it gets there once they are planned, and names what is left', async () => {
    const { type, verdict } = await open();
    await type('Swings in a run', '30');
    expect(verdict()).toContain('This plan gets there');
    expect(wrapper.text()).toContain('Most of it comes from: scatter of the marks.');
  });

  it('says of start and stop over ten swings that they cannot see 20° against 10°', async () => {
    const { type, choose, verdict } = await open();
    await choose('amplitude_effect');
    await choose('ends');
    await type('Swings in a run', '10');
    expect(verdict()).toContain('This plan cannot see it');
    expect(verdict()).toMatch(/Against 20°, T differs by 11 ms: only 0\.7\d times/);
  });

  it('names the length as what keeps g from 0.01 %', async () => {
    const { type, choose, verdict } = await open();
    await choose('gravity');
    await type('Standard uncertainty wanted', '0,01');
    expect(verdict()).toContain('This plan cannot get there');
    expect(verdict()).toContain('What is left comes from: the length.');
  });

  it('offers no g where only the period is known', async () => {
    const { choose } = await open();
    await choose('gravity');
    await choose('period');
    expect(wrapper.find('input[value="gravity"]').exists()).toBe(false);
    expect((wrapper.find('input[value="small_period"]').element as HTMLInputElement).checked).toBe(true);
    expect(wrapper.text()).not.toContain('Standard uncertainty of g');
  });

  it('asks for what cannot be read, beside the box and in place of the verdict', async () => {
    const { type, verdict } = await open();
    await type('Jitter of one tap', 'fast');
    expect(verdict()).toContain('Something is still open');
    expect(wrapper.text()).toContain('“fast” does not read as a number');
    await type('Jitter of one tap', '50');
    await type('Swings in a run', '2.5');
    expect(wrapper.text()).toContain('“2.5” is not a whole number from 1 to 1000.');
  });

  it('weighs a plan only once typing has paused', async () => {
    const { field, verdict } = await open();
    await field('Swings in a run').setValue('300');
    await flushPromises();
    expect(verdict()).toContain('Not there yet');
    vi.advanceTimersByTime(200);
    await flushPromises();
    expect(verdict()).toContain('This plan gets there');
  });
});
