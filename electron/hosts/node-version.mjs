// Loaded before anything else (node --import): a too old Node gets a sentence, not a stack trace.
const oldest = [24, 0];
const [major = 0, minor = 0] = process.versions.node.split('.').map(Number);
if (major < oldest[0] || (major === oldest[0] && minor < oldest[1])) {
  process.stderr.write(
    `Rovimark needs Node ${oldest.join('.')} or newer, this is ${process.versions.node}. ` +
      'Run it through npm (npm start, npm run mark), which uses the Node that "npm ci" installed; ' +
      'if npm was told to skip install scripts, run: npm rebuild node\n',
  );
  process.exit(2);
}
