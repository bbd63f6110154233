"""`python -m cellsection` is the command line."""

from cellsection.cli import main

if __name__ == "__main__":
    main()
