"""Write the committed templates anew: ``python -m strutbook_templates``."""

import sys

from strutbook_templates.generate import write_templates

for path in write_templates():
    sys.stdout.write(f"{path.name}\n")
