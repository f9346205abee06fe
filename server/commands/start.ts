import path from 'node:path';
import { startServer } from '../main.ts';
import { describeInstallation, openInstallation } from './installation.ts';
import { projectRoot } from './project-root.ts';
import { stopOnSignals } from './stop-signals.ts';

/** `npm start`: database, migrations, demo firms, server; and on Ctrl-C all of it in the other order. */
export async function main(): Promise<void> {
  const say = (line: string) => console.log(line);
  let close = async (): Promise<void> => process.exit(130); // nothing runs yet
  stopOnSignals(() => close());

  const installation = await openInstallation(say);
  close = () => installation.close();
  try {
    const { settings, databaseUrls } = installation;
    const server = await startServer({ settings, databaseUrls, clientFolder: path.join(projectRoot, 'dist/client') });
    let stopping = false;
    close = async () => {
      stopping = true;
      say('\nStopping ...');
      await server.close();
      await installation.close();
    };
    void installation.databaseEnded.then(() => {
      if (stopping) return;
      console.error(`PostgreSQL ended by itself; ${path.join(settings.home, 'postgres.log')} says why.`);
      process.exit(1);
    });
  } catch (error) {
    await installation.close();
    throw error;
  }
  for (const line of describeInstallation(installation)) say(line);
}
