#!/bin/sh
# The schema, the models and the reader agree.
exec python3 tests/schema.py "${BUILD:-build}/scantling"
