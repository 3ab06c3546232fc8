"""Runs cells in a real kernel and tells everything that came back.

Reads one JSON object from stdin: {"cells": [cell, ...], "cwd": ..., "timeout": seconds, "linger": seconds}. A cell is
{"code": ..., "cellId"?, "deletedCells"?, "interrupt"?: {"at": text, "times": n}}: the kernel is interrupted when the cell prints
the text `at`, and again each time it does, `times` in all. "queue": true sends every cell at once. "linger" waits
after the last cell for outputs that come late. Writes one JSON object to stdout: {"cells": [{"status", "count",
"messages": [{"type", "content"}]}], "ended": true, false or null} with the messages as they came; "shutdown": true asks the
kernel to end, and "ended" then says whether it did so by itself within 20 s.
"""

import json
import queue
import sys
import time

from jupyter_client.manager import KernelManager


def main():
    task = json.load(sys.stdin)
    manager = KernelManager(kernel_name=task.get("kernel", "tslab"))
    # What the kernel's process prints by itself must not mix with the answer.
    manager.start_kernel(cwd=task["cwd"], stdout=sys.stderr)
    client = manager.client()
    client.start_channels()
    try:
        client.wait_for_ready(timeout=120)
        cells = run(task, manager, client)
        linger(task.get("linger", 0), cells, client)
        ended = shut_down(manager, client) if task.get("shutdown") else None
        json.dump({"cells": [cell["told"] for cell in cells], "ended": ended}, sys.stdout)
    finally:
        client.stop_channels()
        if manager.is_alive():
            manager.shutdown_kernel(now=True)


def send(client, cell):
    metadata = {"cellId": cell["cellId"], "deletedCells": cell.get("deletedCells", [])} if "cellId" in cell else {}
    content = {
        "code": cell["code"],
        "silent": False,
        "store_history": True,
        "user_expressions": {},
        "allow_stdin": False,
        "stop_on_error": False,
    }
    message = client.session.msg("execute_request", content, metadata=metadata)
    client.shell_channel.send(message)
    told = {"status": None, "count": None, "messages": []}
    return {"id": message["header"]["msg_id"], "cell": cell, "told": told, "idle": False, "interrupts": 0}


def run(task, manager, client):
    sent = []
    for cell in task["cells"]:
        sent.append(send(client, cell))
        if not task.get("queue"):
            wait_for(sent, sent[-1:], task, manager, client)
        if sent[-1]["told"]["status"] == "error":
            # The kernel drops what comes within 200 ms of an error.
            time.sleep(0.4)
    wait_for(sent, sent, task, manager, client)
    return sent


def wait_for(sent, wanted, task, manager, client):
    deadline = time.monotonic() + task.get("timeout", 60)
    while not all(entry["idle"] and entry["told"]["status"] for entry in wanted):
        if time.monotonic() > deadline:
            waiting = [entry["cell"]["code"][:200] for entry in wanted if not entry["idle"]]
            raise TimeoutError(f"cells that did not end: {waiting}")
        take_reply(sent, client)
        take_output(sent, manager, client)


def take_reply(sent, client):
    try:
        reply = client.get_shell_msg(timeout=0)
    except queue.Empty:
        return
    for entry in sent:
        if entry["id"] == reply["parent_header"].get("msg_id"):
            entry["told"]["status"] = reply["content"]["status"]
            entry["told"]["count"] = reply["content"].get("execution_count")


def take_output(sent, manager, client, timeout=0.05):
    try:
        message = client.get_iopub_msg(timeout=timeout)
    except queue.Empty:
        return False
    for entry in sent:
        if entry["id"] != message["parent_header"].get("msg_id"):
            continue
        kind, content = message["msg_type"], message["content"]
        if kind == "status":
            entry["idle"] = entry["idle"] or content["execution_state"] == "idle"
            continue
        entry["told"]["messages"].append({"type": kind, "content": content, "afterIdle": entry["idle"]})
        interrupt = entry["cell"].get("interrupt")
        if interrupt and kind == "stream" and entry["interrupts"] < interrupt.get("times", 1):
            if interrupt["at"] in content["text"]:
                entry["interrupts"] += 1
                manager.interrupt_kernel()
    return True


def linger(seconds, sent, client):
    deadline = time.monotonic() + seconds
    while time.monotonic() < deadline:
        take_output(sent, None, client)


def shut_down(manager, client):
    started = time.monotonic()
    client.shutdown()
    while manager.is_alive() and time.monotonic() - started < 20:
        time.sleep(0.02)
    return not manager.is_alive()


if __name__ == "__main__":
    main()
