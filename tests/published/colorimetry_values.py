"""The rows of data/colorimetry.yaml, for the tests beside it."""

from pathlib import Path

import yaml

VALUES = yaml.safe_load((Path(__file__).parent / "data" / "colorimetry.yaml").read_text(encoding="utf-8"))
