"""Speed and memory, on request: `python -m tests.benchmarks [--tenfold]`. No part of the tests."""
