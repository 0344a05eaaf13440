"""The job file: its limits, reading, writing, migrations, schema, comparing and merging."""

from .limits import FORMAT, VERSION
from .merge import compare, merge
from .reading import Opened, open_bytes
from .writing import blank, blank_row, to_bytes

__all__ = ["FORMAT", "VERSION", "Opened", "blank", "blank_row", "compare", "merge", "open_bytes", "to_bytes"]
