import path from 'node:path';
import { startServer } from '../main.ts';
import { claimHome, describeInstallation, openInstallation } from './installation.ts';
import { projectRoot } from './project-root.ts';
import { shutdownOnSignals } from './shutdown.ts';

/** `npm start`: database, migrations, demo firms, server; and on Ctrl-C all of it in the other order. */
export async function main(): Promise<void> {
  const say = (line: string) => console.log(line);
  const shutdown = shutdownOnSignals();
  const claim = await claimHome();
  shutdown.add(claim.release);
  try {
    const installation = await openInstallation(claim, say);
    shutdown.add(installation.close);
    const { settings, databaseUrls } = installation;
    const server = await startServer({ settings, databaseUrls, clientFolder: path.join(projectRoot, 'dist/client') });
    shutdown.add(server.close);
    shutdown.add(() => say('\nStopping ...'));
    void installation.databaseEnded.then(() => {
      if (shutdown.hasBegun()) return;
      console.error(`PostgreSQL ended by itself; ${path.join(settings.home, 'postgres.log')} says why.`);
      process.exit(1);
    });
    for (const line of describeInstallation(installation)) say(line);
  } catch (error) {
    await shutdown.run();
    throw error;
  }
}
