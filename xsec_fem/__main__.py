"""python -m xsec_fem: the same as the command xsec-fem."""

from xsec_fem.cli.main import main

if __name__ == "__main__":
    raise SystemExit(main())
