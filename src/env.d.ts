/** Version of the app, from package.json, written in by the build. */
declare const __APP_VERSION__: string;
