import { afterEach, expect, it, vi } from 'vitest';
import { createApp, defineComponent, h } from 'vue';
import { ApiError } from '@/api/ApiError';
import { useForm } from '@/composables/useForm';
import { i18n } from '@/i18n';

let unmount: () => void = () => undefined;
afterEach(() => unmount());

function formWith(send: () => Promise<void>, check: () => string | null = () => null) {
  let form!: ReturnType<typeof useForm<'nickname'>>;
  const app = createApp(
    defineComponent({
      setup() {
        form = useForm({ nickname: check }, send);
        return () => h('div');
      },
    }),
  ).use(i18n);
  app.mount(document.createElement('div'));
  unmount = () => app.unmount();
  return form;
}

it('says what is missing only after the first try, and sends nothing', async () => {
  const send = vi.fn(() => Promise.resolve());
  const form = formWith(send, () => 'Fill this in.');
  expect(form.errors.value.nickname).toBeNull();
  await form.submit();
  expect(form.errors.value.nickname).toBe('Fill this in.');
  expect(send).not.toHaveBeenCalled();
});

it('sends once, however often it is pressed', async () => {
  let finish: () => void = () => undefined;
  const send = vi.fn(() => new Promise<void>((resolve) => (finish = resolve)));
  const form = formWith(send);
  const first = form.submit();
  await form.submit();
  expect(send).toHaveBeenCalledTimes(1);
  finish();
  await first;
  expect(form.isSending.value).toBe(false);
});

it('makes a sentence of what the server says in the middle of one', async () => {
  const said = [{ path: 'nickname', message: 'a nickname or roster number is needed' }];
  const form = formWith(() => Promise.reject(new ApiError('refused', 422, 'bad_request', 'Look again.', said)));
  await form.submit();
  expect(form.errors.value.nickname).toBe('A nickname or roster number is needed.');
});

it('puts the server’s words beside the field they are about', async () => {
  const said = [{ path: 'nickname', message: 'Bench 1 has a Bob already.' }];
  const form = formWith(() => Promise.reject(new ApiError('refused', 409, 'name_taken', 'Taken.', said)));
  await form.submit();
  expect(form.errors.value.nickname).toBe('Bench 1 has a Bob already.');
  expect(form.problem.value).toBeNull();
});

it.each([
  ['offline', /server was not reached/],
  ['timeout', /did not answer in time/],
  ['not_ours', /Wi-Fi sign-in page/],
  ['server', /trouble at the moment/],
] as const)('%s is said in words with something to do', async (kind, words) => {
  const form = formWith(() => Promise.reject(new ApiError(kind, 0, '', 'Failed to fetch')));
  await form.submit();
  expect(form.problem.value).toMatch(words);
});
