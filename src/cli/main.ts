#!/usr/bin/env node
import { isFermistateError } from "../errors.js";

process.exitCode = isFermistateError(undefined) ? 1 : 0;
