import { computed, type Ref } from 'vue';
import { useI18n } from 'vue-i18n';
import { pivotToCentre } from '@shared/physics/rigLength';
import type { Rig } from '@shared/schemas/rig';
import { formatMeasured } from '@shared/units/formatMeasured';
import { useSettings } from '@/stores/useSettings';

/** Upper ends, m, of what a length is likened to, so that a wrong unit is seen at once. */
const LIKENESSES = [
  [0.05, 'finger'],
  [0.2, 'hand'],
  [0.35, 'forearm'],
  [0.6, 'knee'],
  [0.9, 'table'],
  [1.25, 'waist'],
  [1.6, 'shoulder'],
  [2.3, 'door'],
  [4, 'ceiling'],
  [50, 'house'],
] as const;

/** Pivot to the centre of the bob, computed from the readings: with its unit, likened to something, and what is missing. */
export function useCentre(rig: Ref<Rig | null>) {
  const { t } = useI18n();
  const settings = useSettings();
  const length = computed(() => (rig.value ? pivotToCentre(rig.value) : undefined));

  return {
    length,
    centre: computed(() => {
      if (!length.value) return null;
      const { value, u } = length.value;
      return `${formatMeasured(value, u, { decimalMark: settings.decimalMark }).text} m`;
    }),
    inWords: computed(() => {
      const likeness = LIKENESSES.find(([upTo]) => length.value && length.value.value <= upTo);
      return likeness ? t(`rig.likeness.${likeness[1]}`) : '';
    }),
    needsDiameter: computed(() => {
      const to = new Set(rig.value?.length_readings.map((reading) => reading.to));
      const isBetween = to.has('top') && to.has('bottom');
      return !isBetween && !to.has('centre') && to.size > 0 && rig.value?.bob_diameter_um === null;
    }),
  };
}
