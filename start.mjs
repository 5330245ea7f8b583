#!/usr/bin/env node
// The one command. Plain Node without any package, because it is what installs the packages.
import { checkNode } from './scripts/check-node.mjs';

checkNode();
// Only now: what follows is written for the Node that was just asked for.
import('./scripts/launch.mjs').then(({ launch }) => launch('db/setup/start.ts'));
