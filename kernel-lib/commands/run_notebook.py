"""Runs a notebook in its own kernel and saves it with its outputs, telling how far it is.

Usage: run_notebook.py NOTEBOOK OUTPUT

The kernel works in the folder of NOTEBOOK. One JSON object a line goes to stdout: {"event": "cell", "index": i} when a cell
starts, then {"event": "done"}, {"event": "failed", "index": i} or {"event": "stopped", "message": ...}. OUTPUT is written
in every case, and signed, so that JupyterLab trusts the figures in it.
"""

import asyncio
import json
import os
import signal
import sys

import nbformat
from nbclient import NotebookClient
from nbclient.exceptions import CellExecutionError, DeadKernelError
from nbformat.sign import NotebookNotary


def tell(**event):
    print(json.dumps(event), flush=True)


def save(notebook, path):
    """Writes beside the target first, so that a full disk or an interrupt leaves no half notebook."""
    beside = path + ".tmp"
    nbformat.write(notebook, beside)
    os.replace(beside, path)
    NotebookNotary().sign(notebook)


async def run(client):
    """Executes, until the end or SIGTERM. Ctrl-C on a terminal reaches this process too; whoever started it decides."""
    loop = asyncio.get_running_loop()
    task = asyncio.ensure_future(client.async_execute())

    def listen(**_):
        loop.add_signal_handler(signal.SIGTERM, task.cancel)
        loop.add_signal_handler(signal.SIGINT, lambda: None)

    listen()
    # Starting the kernel sets handlers that end it under a running cell; these take their place.
    client.on_notebook_start = listen
    await task


def main(source, output):
    notebook = nbformat.read(source, as_version=4)
    state = {"index": -1}

    def on_cell_execute(cell, cell_index):
        state["index"] = cell_index
        tell(event="cell", index=cell_index)

    client = NotebookClient(
        notebook,
        kernel_name="tslab",
        timeout=None,
        startup_timeout=180,
        resources={"metadata": {"path": os.path.dirname(os.path.abspath(source))}},
        on_cell_execute=on_cell_execute,
    )
    event = {"event": "done"}
    try:
        asyncio.run(run(client))
    except CellExecutionError:
        event = {"event": "failed", "index": state["index"]}
    except DeadKernelError:
        event = {"event": "stopped", "index": state["index"], "message": "the kernel died"}
    except (asyncio.CancelledError, KeyboardInterrupt):
        event = {"event": "stopped", "index": state["index"], "message": "interrupted"}
    except Exception as error:
        event = {"event": "stopped", "index": state["index"], "message": str(error) or type(error).__name__}
    save(notebook, output)
    tell(**event)
    return 0 if event["event"] == "done" else 1


if __name__ == "__main__":
    sys.exit(main(sys.argv[1], sys.argv[2]))
