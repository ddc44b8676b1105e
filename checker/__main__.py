"""`python -m checker` is the same as `samestrut`."""

from checker.cli import main

raise SystemExit(main())
