"""The analysis from a shell: one table and its choices in, one JSON object out."""

import sys

from analysis.shell import main

sys.exit(main(sys.argv[1:]))
