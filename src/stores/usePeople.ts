import { defineStore } from 'pinia';
import { shallowRef } from 'vue';
import { ApiError } from '@/api/ApiError';
import * as api from '@/api/people';
import type { PendingInvite, StaffMember, StaffRole } from '@shared/schemas/accounts';

/** The coordinator's list of staff and open invitations. Only from the server: nothing of it is kept here. */
export const usePeople = defineStore('people', () => {
  const staff = shallowRef<StaffMember[]>([]);
  const invites = shallowRef<PendingInvite[]>([]);
  const error = shallowRef<ApiError | null>(null);
  const isLoading = shallowRef(false);

  async function load(): Promise<void> {
    isLoading.value = true;
    try {
      const answer = await api.getPeople();
      staff.value = answer.staff;
      invites.value = answer.invites;
      error.value = null;
    } catch (cause) {
      if (!(cause instanceof ApiError)) throw cause;
      error.value = cause;
    } finally {
      isLoading.value = false;
    }
  }

  async function andLoad<T>(action: Promise<T>): Promise<T> {
    const answer = await action;
    await load();
    return answer;
  }
  /** The answer's `link` is there only when the server sends no mail: pass it on by hand. */
  const invite = (email: string, role: StaffRole) => andLoad(api.invite({ email, role }));
  const withdrawInvite = (id: string) => andLoad(api.withdrawInvite(id));
  const disable = (id: string) => andLoad(api.disablePerson(id));
  const enable = (id: string) => andLoad(api.enablePerson(id));
  /** A link to choose a new password; null when the server mailed it. */
  const resetLink = async (id: string): Promise<string | null> => (await api.resetLink(id)).link;

  return { staff, invites, error, isLoading, load, invite, withdrawInvite, disable, enable, resetLink };
});
