#!/usr/bin/env node
// Sets up what is missing and runs every test. Plain Node without any package, because it is what installs the packages.
import { checkNode } from './check-node.mjs';

checkNode();
import('./launch.mjs').then(({ launch }) => launch('scripts/run-tests.ts'));
