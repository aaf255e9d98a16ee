"""Entry point of the command ``fishbelly`` and of ``python -m fishbelly``."""

from fishbelly.cli.main import main

if __name__ == "__main__":
    main()
