/** Gives a test file the settings of a web process; before anything reads them. Ports that nothing listens on. */
export function setWebEnvironment(settings: { databaseUrl?: string; trustProxy?: boolean } = {}): void {
  Object.assign(process.env, {
    DATABASE_URL: settings.databaseUrl ?? 'postgresql://nobody@127.0.0.1:1/none',
    NEXTAUTH_SECRET: 'a secret of the tests, long enough to be one',
    NEXTAUTH_URL: 'http://ellwand.example:4300',
    ELLWAND_INSTANCE: 'test',
    ELLWAND_TRUST_PROXY: settings.trustProxy ? '1' : '0',
  });
}
