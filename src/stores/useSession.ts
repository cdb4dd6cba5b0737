import { defineStore } from 'pinia';
import { computed, markRaw, shallowRef } from 'vue';
import * as api from '@/api/accounts';
import { ApiError } from '@/api/ApiError';
import {
  isCookieInDoubt,
  noteCookieInDoubt,
  forgetJoinings,
  joiningId,
  noteSignOutOwed,
  owesSignOut,
  rememberedMe,
  rememberMe,
  watchRememberedMe,
} from '@/db/appStore';
import { claimGuest, countGuestRuns } from '@/db/claimGuest';
import { ownerKey, type LocalStore } from '@/db/localStore';
import { askToKeep, openStoreOf } from '@/db/stores';
import { withUploadLock } from '@/sync/uploadLock';
import { isRecording } from '@/sync/recordingLock';
import type { Me } from '@shared/schemas/accounts';

type Body<F extends (body: never) => unknown> = Parameters<F>[0];

/**
 * Who is here, and their store. The phone remembers both, so that everything but sending goes on with no
 * network and after the sign-in has expired. Every change of account waits for the uploader to be done.
 */
export const useSession = defineStore('session', () => {
  const me = shallowRef<Me | null>(null);
  const store = shallowRef<LocalStore | null>(null);
  /** Set when this device's storage cannot be used at all. */
  const storageTrouble = shallowRef<string | null>(null);
  /** confirmed: the server said so on this page load. expired: it knows this browser no more. */
  const standing = shallowRef<'unknown' | 'confirmed' | 'expired'>('unknown');
  const isStaff = computed(() => me.value !== null && me.value.kind !== 'student');
  /** Where this person's work begins: the Desk is for whoever has classes. */
  const home = computed(() => (me.value?.kind === 'teacher' || me.value?.kind === 'coordinator' ? '/desk' : '/bench'));

  async function enter(who: Me | null): Promise<void> {
    const opened = markRaw(await openStoreOf(who));
    me.value = who;
    store.value = opened;
  }

  const ready = begin();
  async function begin(): Promise<void> {
    try {
      await enter(await rememberedMe());
    } catch (cause) {
      storageTrouble.value = cause instanceof Error ? cause.message : String(cause);
      return;
    }
    let isFirst = true;
    watchRememberedMe().subscribe((who) => {
      // The first word is of what was read above, and may come after the server's answer.
      const isKnown = isFirst && ownerKey(who) === ownerKey(me.value);
      isFirst = false;
      if (!isKnown) void followOtherTab(who);
    });
    void withUploadLock(finishClaim).catch(() => undefined);
    void askTheServer();
  }

  /** A page may have ended while it moved the guest's runs into this account. */
  async function finishClaim(): Promise<void> {
    if (me.value && store.value) await claimGuest(store.value, me.value, !(await isRecording()), 'begun');
  }

  /** In the background, at the start and when the network may be back. Without an answer nothing changes. */
  function askTheServer(): Promise<void> {
    return withUploadLock(confirm).catch(() => undefined);
  }

  /** Another tab changed the account: this one goes along, but never away from a run being timed. */
  async function followOtherTab(who: Me | null): Promise<void> {
    const isSame = ownerKey(who) === ownerKey(me.value);
    if (!isSame || standing.value === 'expired') standing.value = 'unknown';
    if (isSame) return;
    if (!(await isRecording())) await enter(who);
  }

  /**
   * Asks the server who this browser is. What it says counts; without an answer the phone's memory does.
   * Call it under the upload lock.
   */
  async function confirm(): Promise<void> {
    await tellSignOut();
    const answer = await api.getMe();
    if (answer.me && ownerKey(answer.me) !== ownerKey(me.value)) await settle(answer.me, false);
    else if (answer.me) {
      await rememberMe(answer.me);
      me.value = answer.me;
      standing.value = 'confirmed';
    } else standing.value = 'expired';
    await noteCookieInDoubt(false);
  }

  /** True once the server takes this browser for the owner of that store. Call it under the upload lock. */
  async function isOwner(owner: string): Promise<boolean> {
    if (ownerKey(await rememberedMe()) !== owner) return false;
    if (standing.value !== 'confirmed' || (await isCookieInDoubt())) await confirm();
    if (standing.value === 'expired') throw new ApiError('signed_out', 401, '', 'the sign-in has run out');
    return ownerKey(me.value) === owner;
  }

  /** The server said 401: the sign-in ran out. Nothing is deleted and field work goes on. */
  function noteExpired(): void {
    standing.value = 'expired';
  }

  async function settle(who: Me, claim: boolean): Promise<void> {
    await rememberMe(who);
    await enter(who);
    standing.value = 'confirmed';
    if (claim && store.value) await claimGuest(store.value, who, !(await isRecording()));
    void askToKeep(navigator.storage);
  }

  /**
   * One way in: ask, and settle with the answer, while no other tab sends or changes the account.
   * `onAnswer` hears the answer before storage is touched, which may fail.
   */
  function come<Answer extends { me: Me | null }>(
    ask: () => Promise<Answer>,
    claim: boolean,
    onAnswer: (answer: Answer) => void = () => undefined,
  ): Promise<Answer> {
    return withUploadLock(async () => {
      // A phone that keeps nothing can sign in all the same.
      await noteCookieInDoubt(true).catch(() => undefined);
      const answer = await ask();
      onAnswer(answer);
      if (!answer.me) throw new ApiError('signed_out', 200, '', 'the server did not say who is signed in');
      await noteSignOutOwed(false);
      await settle(answer.me, claim);
      await noteCookieInDoubt(false);
      return answer;
    });
  }

  /** `claim` takes runs timed on this phone without a class along. The PIN is told once: `onPin` has it first of all. */
  async function join(place: Omit<Body<typeof api.join>, 'join_id'>, claim: boolean, onPin?: (pin: string) => void) {
    const join_id = await joiningId(JSON.stringify(place));
    const answer = await come(
      () => api.join({ ...place, join_id }),
      claim,
      ({ pin }) => onPin?.(pin),
    );
    await forgetJoinings();
    return answer;
  }
  const comeBack = (body: Body<typeof api.comeBack>, claim: boolean) => come(() => api.comeBack(body), claim);
  const signIn = (body: Body<typeof api.signIn>, claim: boolean) => come(() => api.signIn(body), claim);
  const setUp = (body: Body<typeof api.setUp>) => come(() => api.setUp(body), false);
  const acceptInvite = (body: Body<typeof api.acceptInvite>) => come(() => api.acceptInvite(body), false);
  const askForReset = (email: string) => api.forgotPassword({ email });
  const resetPassword = (body: Body<typeof api.resetPassword>) => api.resetPassword(body);
  const lookUpClass = (code: string) => api.lookUpClass({ code });

  /**
   * Leaves this account, with or without network. Its store stays on the phone, sealed, with all that was
   * not sent. A server that could not be told is told before anything else is asked of it.
   */
  function signOut(): Promise<void> {
    return withUploadLock(async () => {
      await noteSignOutOwed(true);
      await rememberMe(null);
      await enter(null);
      standing.value = 'unknown';
      await tellSignOut().catch(() => undefined);
    });
  }

  /** Tells the server of a sign-out it has not heard of. */
  async function tellSignOut(): Promise<void> {
    if (!(await owesSignOut())) return;
    await api.signOut().catch(unlessSignedOutAlready);
    await noteSignOutOwed(false);
  }

  return {
    me,
    store,
    storageTrouble,
    standing,
    isStaff,
    home,
    ready,
    askTheServer,
    isOwner,
    noteExpired,
    join,
    comeBack,
    signIn,
    setUp,
    acceptInvite,
    askForReset,
    resetPassword,
    lookUpClass,
    countGuestRuns,
    signOut,
  };
});

function unlessSignedOutAlready(cause: unknown): void {
  if (cause instanceof ApiError && cause.kind === 'signed_out') return;
  throw cause;
}
