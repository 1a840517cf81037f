"""``python -m kernelscan``."""

from kernelscan.cli.app import main

if __name__ == "__main__":
    main()
