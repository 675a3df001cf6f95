"""``python -m calcpack``."""

import sys

from calcpack.cli import main

sys.exit(main())
