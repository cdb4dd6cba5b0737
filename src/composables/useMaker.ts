import { deviceId } from '@/db/appStore';
import type { RunPlace } from '@/db/runs';
import { useSession } from '@/stores/useSession';
import type { Maker } from '@shared/timing/sealTapRun';
import { useSafetySeen } from './useSafetySeen';

/** What every run made here says of where and with what it was made. */
export function useMaker() {
  const session = useSession();

  async function maker(): Promise<Maker> {
    const cautions_seen_wall_ms = useSafetySeen().seenToday_ms();
    return { app_version: __APP_VERSION__, device_id: await deviceId(), cautions_seen_wall_ms };
  }

  function place(): RunPlace {
    const me = session.me;
    return me?.kind === 'student' ? { class_id: me.class.id, bench: me.bench } : { class_id: null, bench: null };
  }
  return { maker, place };
}
