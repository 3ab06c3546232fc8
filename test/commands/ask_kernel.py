"""Starts the kernel in a folder, imports the library, and prints what it answers to requests for completion and for help.

Usage: ask_kernel.py FOLDER IMPORT REQUEST..., each request "complete:CODE" or "inspect:CODE" with the cursor at the end of CODE.
Prints one JSON list, an entry a request.
"""

import json
import sys

from jupyter_client.manager import start_new_kernel

folder, first, *requests = sys.argv[1:]
manager, client = start_new_kernel(kernel_name="tslab", cwd=folder)
try:
    reply = client.execute_interactive(first, timeout=120, output_hook=lambda message: None)
    if reply["content"]["status"] != "ok":
        sys.exit("the import failed")
    answers = []
    for request in requests:
        kind, code = request.split(":", 1)
        answers.append(getattr(client, kind)(code, len(code), reply=True, timeout=60)["content"])
    print(json.dumps(answers))
finally:
    client.stop_channels()
    manager.shutdown_kernel(now=True)
