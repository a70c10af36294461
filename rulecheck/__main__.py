"""`python -m rulecheck` is the command `rulecheck`."""

from rulecheck.cli import main

if __name__ == "__main__":
    main()
