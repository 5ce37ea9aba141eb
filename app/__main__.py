"""`python app`: set up what is missing, then open the dashboard."""

import sys
from pathlib import Path

if sys.version_info < (3, 11):  # said before anything is imported that an older Python cannot read
    sys.exit("Crossgrain needs Python 3.11 or newer, and this is Python {}.{}: start it with a newer one.".format(*sys.version_info[:2]))
sys.path[0] = str(Path(__file__).resolve().parent.parent)  # the checkout in place of this folder, so that `app` is the package

from app.start import launch

if __name__ == "__main__":
    sys.exit(launch.main(sys.argv[1:]))
