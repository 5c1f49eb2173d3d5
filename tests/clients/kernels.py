"""Kernels to run cells in: what the other scripts share."""

import contextlib
import time

from jupyter_client.manager import KernelManager

# A session starts in 2 s; libraries are there. The rest is for a machine with other work.
PATIENCE = 60


class Kernel:
    """A kernel and one client of it."""

    def __init__(self, environment=None):
        self.manager = KernelManager(kernel_name="hade")
        self.manager.kernel_spec.env.update(environment or {})
        self.started = time.monotonic()
        self.manager.start_kernel()
        self.client = self.manager.blocking_client()
        self.client.start_channels()
        self.client.wait_for_ready(timeout=PATIENCE)
        self.ready_after = time.monotonic() - self.started

    def send(self, code, **options):
        return self.client.execute(code, **options)

    def reply(self, message_id, timeout=PATIENCE):
        """The answer to one request; others are dropped."""
        deadline = time.monotonic() + timeout
        while True:
            message = self.client.get_shell_msg(timeout=max(0.01, deadline - time.monotonic()))
            if message["parent_header"].get("msg_id") == message_id:
                return message["content"]

    def outputs(self, message_id, timeout=PATIENCE):
        """What is published about one request, each with the time it came."""
        found = []
        deadline = time.monotonic() + timeout
        while True:
            message = self.client.get_iopub_msg(timeout=max(0.01, deadline - time.monotonic()))
            if message["parent_header"].get("msg_id") != message_id:
                continue
            kind, content = message["msg_type"], message["content"]
            if kind == "status" and content["execution_state"] == "idle":
                return found
            found.append((time.monotonic(), kind, content))

    def run(self, code, timeout=PATIENCE, **options):
        """Runs a cell: its answer, and what it published but for the state and the echo of the code."""
        message_id = self.send(code, **options)
        shown = [o for o in self.outputs(message_id, timeout) if o[1] not in ("status", "execute_input")]
        return self.reply(message_id, timeout), shown

    def text(self, code, stream="stdout", **options):
        """What a cell that must succeed printed."""
        reply, shown = self.run(code, **options)
        assert reply["status"] == "ok", reply
        return "".join(c["text"] for _, kind, c in shown if kind == "stream" and c["name"] == stream)


@contextlib.contextmanager
def kernel(environment=None):
    """A kernel that is shut down in order."""
    one = Kernel(environment)
    try:
        yield one
    finally:
        one.client.stop_channels()
        one.manager.shutdown_kernel()
