import { defineAsyncComponent, type Component } from 'vue';
import PartLoading from './PartLoading.vue';
import PartMissing from './PartMissing.vue';

/** A part of a page that is fetched when it is first shown, with words for while it comes and for when it does not. */
export const laterPart = <Part extends Component>(loader: () => Promise<{ default: Part }>) =>
  defineAsyncComponent({ loader, loadingComponent: PartLoading, errorComponent: PartMissing });
