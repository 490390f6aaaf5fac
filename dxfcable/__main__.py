"""Run the command line with `python -m dxfcable`."""

from dxfcable.cli import main

main()
