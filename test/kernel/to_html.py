"""Usage: to_html.py NOTEBOOK OUTPUT: the page that nbconvert makes of an executed notebook."""

import sys

from nbconvert import HTMLExporter

body, _ = HTMLExporter().from_filename(sys.argv[1])
with open(sys.argv[2], "w", encoding="utf-8") as file:
    file.write(body)
