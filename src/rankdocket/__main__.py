"""``python -m rankdocket``."""

from rankdocket.cli.main import main

if __name__ == "__main__":
    main()
