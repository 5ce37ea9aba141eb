"""`python tests`: set up what is missing, then run the tests; further words go to pytest as they are."""

import sys
from pathlib import Path

if sys.version_info < (3, 11):  # said before anything is imported that an older Python cannot read
    sys.exit("Crossgrain's tests need Python 3.11 or newer, not {}.{}: start them with a newer one.".format(*sys.version_info[:2]))
sys.path[0] = str(Path(__file__).resolve().parent.parent)  # the checkout in place of this folder, so that `app` is the package

from app.start import environment
from app.start.problems import SetupProblem


def main(arguments: list[str]) -> int:
    """Become pytest; return the status where that cannot be."""
    try:
        python = environment.prepare([environment.APP_PINS, environment.TEST_PINS])
    except SetupProblem as problem:
        sys.stderr.write(f"{problem}\n")
        return 1
    except KeyboardInterrupt:
        sys.stderr.write("\nStopped; the next start sets up afresh.\n")
        return 130
    return environment.become(python, "-m", "pytest", *arguments)


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
