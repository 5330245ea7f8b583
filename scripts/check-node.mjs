// Written in words that old versions of Node understand, because it has to run there to say so.
const OLDEST = [20, 12];

/**
 * @param {string} version - e.g. "20.12.0"
 * @returns {string | null} what to do, when it is older than what the product needs
 */
export function findNodeFault(version) {
  const parts = version.split('.').map(Number);
  if (parts[0] > OLDEST[0] || (parts[0] === OLDEST[0] && parts[1] >= OLDEST[1])) return null;
  return (
    'Motebook needs Node ' +
    OLDEST.join('.') +
    ' or newer; this is Node ' +
    version +
    '. ' +
    'Install Node 20 (for example from nodejs.org, or with your version manager), then run the same command again.'
  );
}

/** Ends the process with a clear message when Node is too old. */
export function checkNode() {
  const fault = findNodeFault(process.versions.node);
  if (fault === null) return;
  console.error(fault);
  process.exit(1);
}
