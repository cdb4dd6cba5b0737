import '@fontsource/nunito-sans/latin-400.css';
import '@fontsource/nunito-sans/latin-700.css';
import '@fontsource/nunito-sans/latin-800.css';
import 'quasar/src/css/index.sass';
import '@/css/tokens.css';
import '@/css/app.css';
import { createPinia } from 'pinia';
import { Quasar } from 'quasar';
import iconSet from 'quasar/icon-set/svg-material-icons-sharp';
import { registerSW } from 'virtual:pwa-register';
import { createApp } from 'vue';
import App from '@/App.vue';
import { beginAppUpdate } from '@/composables/useAppUpdate';
import { i18n } from '@/i18n';
import { router } from '@/router';
import { warmFieldPages } from '@/router/warm';

const app = createApp(App);
// What broke is told to the person by the page's ErrorBoundary, and here to whoever looks into the browser.
app.config.errorHandler = (cause) => reportError(cause);
app
  .use(createPinia())
  .use(Quasar, { iconSet, config: { ripple: false } })
  .use(i18n)
  .use(router)
  .mount('#app');

beginAppUpdate(registerSW);
void router.isReady().then(() => {
  // The pad fetches nothing beside what a tap needs; it warms the rest once it stands.
  if (router.currentRoute.value.name !== 'pad') warmFieldPages();
});
