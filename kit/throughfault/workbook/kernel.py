"""One real kernel per review: this Python, a private channel, no dead waits.

The stock client waits a fixed time for a silent channel when a kernel starts and shuts it down
politely; both are waiting only. What runs in the kernel is unchanged.
"""

from __future__ import annotations

import asyncio
import os
import shutil
import sys
import tempfile
import time
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from queue import Empty
from typing import Any

from jupyter_client import AsyncKernelClient, AsyncKernelManager
from jupyter_client.kernelspec import KernelSpec, KernelSpecManager
from papermill.clientwrap import PapermillNotebookClient
from papermill.engines import Engine, papermill_engines

from throughfault.errors import RunError

__all__ = ["ENGINE", "kernel_environment"]

ENGINE = "throughfault"
CELL_TIMEOUT = 600
START_TIMEOUT = 120


class ThisPython(KernelSpecManager):  # type: ignore[misc]
    """Whatever kernels are installed, a review runs in the Python that runs the kit."""

    def get_kernel_spec(self, kernel_name: str) -> KernelSpec:
        """Return the one kernel there is."""
        argv = [sys.executable, "-m", "ipykernel_launcher", "-f", "{connection_file}"]
        return KernelSpec(argv=argv, display_name="Python 3", language="python", name=kernel_name)


class PromptClient(AsyncKernelClient):  # type: ignore[misc]
    """A client that is ready as soon as the kernel has answered on both channels."""

    async def wait_for_ready(self, timeout: float | None = None) -> None:  # noqa: ASYNC109 - the library's own name
        """Wait until the kernel answers a request and its idle state is seen for it."""
        deadline = time.monotonic() + (timeout or START_TIMEOUT)
        while time.monotonic() < deadline:
            request = self.kernel_info()
            try:
                reply = await self.shell_channel.get_msg(timeout=1)
                self._handle_kernel_info_reply(reply)
                if await self._idle_seen(request):
                    return
            except Empty:
                if not await self.is_alive():
                    break
        raise RunError("the workbook's kernel did not start; nothing was written.")

    async def _idle_seen(self, request: str) -> bool:
        while True:
            try:
                message = await self.iopub_channel.get_msg(timeout=0.3)
            except Empty:
                return False  # not connected yet: ask again
            mine = message["parent_header"].get("msg_id") == request
            if mine and message["content"].get("execution_state") == "idle":
                return True


class ReviewEngine(Engine):  # type: ignore[misc]
    """Papermill engine: stock notebook client on the kernel and client above."""

    @classmethod
    def execute_managed_notebook(cls, nb_man: Any, kernel_name: str, **_: Any) -> None:
        """Execute the notebook; papermill tracks cells and errors as ever."""
        folder = tempfile.mkdtemp(prefix="tf")
        manager = AsyncKernelManager(
            kernel_spec_manager=ThisPython(),
            client_factory=PromptClient,
            connection_file=str(Path(folder) / "kernel.json"),
            **({} if os.name == "nt" else {"transport": "ipc", "ip": str(Path(folder) / "k")}),
        )
        client = PapermillNotebookClient(
            nb_man, km=manager, kernel_name=kernel_name, timeout=CELL_TIMEOUT, startup_timeout=START_TIMEOUT
        )
        client.shutdown_kernel = "immediate"
        try:
            client.execute(cleanup_kc=True)
        finally:
            if manager.has_kernel:
                asyncio.run(manager.shutdown_kernel(now=True))
            shutil.rmtree(folder, ignore_errors=True)


papermill_engines.register(ENGINE, ReviewEngine)


@contextmanager
def kernel_environment(scratch: Path) -> Iterator[None]:
    """Give the kernel a repeatable environment: no user profile, fixed hash order, one thread, no display.

    The kernel starts in another working folder, so that a relative `scratch` would lead it elsewhere.
    """
    wanted = {
        "IPYTHONDIR": str(scratch.resolve() / "ipython"),
        "MPLBACKEND": "agg",
        "OMP_NUM_THREADS": "1",
        "OPENBLAS_NUM_THREADS": "1",
        "PYTHONHASHSEED": "0",
        "SOURCE_DATE_EPOCH": "0",
    }
    before = {name: os.environ.get(name) for name in wanted}
    os.environ.update(wanted)
    try:
        yield
    finally:
        for name, value in before.items():
            if value is None:
                os.environ.pop(name, None)
            else:
                os.environ[name] = value
