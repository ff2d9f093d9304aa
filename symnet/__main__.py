"""``python -m symnet`` is the same as ``symnet``."""

from symnet.cli import main

if __name__ == "__main__":
    raise SystemExit(main())
