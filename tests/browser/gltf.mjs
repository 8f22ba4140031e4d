// Files of surfaces before the Khronos glTF validator: no error and no warning.
import { readFileSync } from 'node:fs';
import { basename } from 'node:path';
import validator from 'gltf-validator';

let failed = 0;
for (const file of process.argv.slice(2)) {
  const { issues, info } = await validator.validateBytes(new Uint8Array(readFileSync(file)));
  const clean = issues.numErrors === 0 && issues.numWarnings === 0;
  console.log(`${clean ? 'ok  ' : 'FAIL'} ${basename(file)} is glTF ${info.version}: ${issues.numErrors} errors, ${issues.numWarnings} warnings, ${issues.numInfos} infos (${info.totalTriangleCount} triangles)`);
  for (const message of issues.messages) console.log(`     ${message.code} ${message.pointer}: ${message.message}`);
  if (!clean) failed += 1;
}
process.exit(failed ? 1 : 0);
