"""How fast a check is and how much of real books it covers: `python -m benchmarks --help`."""
