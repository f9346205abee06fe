import { startCluster } from '../../server/cluster/cluster.ts';
import { findExistingCluster } from '../../server/cluster/data-folder.ts';
import { lockFolder } from '../../server/cluster/folder-lock.ts';
import { prepareHome, readSecrets } from '../../server/cluster/home.ts';

/** A program of its own that a test can kill: starts the cluster of the folder named on its line and prints its address. */
const home = String(process.argv[2]);
prepareHome(home);
lockFolder(home);
const secrets = readSecrets(home, { recordsExist: findExistingCluster(home) !== null });
const cluster = await startCluster({ home, secrets, say: () => undefined });
console.log(cluster.superuserUrl('postgres'));
setInterval(() => undefined, 60_000);
