"""The time of a trivial cell, in one run on one machine: through the kernel over ZeroMQ, in JShell in one process,
and through the reference Python kernel. The same client measures both kernels, from execute_request sent until
execute_reply and idle are both there. The sessions take turns in short blocks, so that a noisy machine treats all alike.
"""

import argparse
import os
import pathlib
import statistics
import subprocess
import sys
import tempfile
import time

CELL = "1+1"
LIMIT = 120


class Kernel:
    """A kernel process, and the reference client's sockets and session, read without its queues: they cost time of
    their own that is no kernel's."""

    def __init__(self, command):
        import zmq
        from jupyter_client.blocking import BlockingKernelClient
        from jupyter_client.connect import write_connection_file

        self.folder = tempfile.TemporaryDirectory()
        path = os.path.join(self.folder.name, "connection.json")
        write_connection_file(path)
        start = time.perf_counter()
        self.process = subprocess.Popen([word.replace("{connection_file}", path) for word in command],
                                        stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
        client = BlockingKernelClient(connection_file=path)
        client.load_connection_file()
        self.session = client.session
        self.shell = client.connect_shell()
        self.iopub = client.connect_iopub()
        self.poller = zmq.Poller()
        self.poller.register(self.shell, zmq.POLLIN)
        self.poller.register(self.iopub, zmq.POLLIN)
        self.ask("kernel_info_request", {}, needs_idle=False)
        self.ready = time.perf_counter() - start
        self.cell(needs_idle=False)
        self.first = time.perf_counter() - start
        # What was published before the subscription counted is lost; now it counts.
        self.cell()

    def cell(self, needs_idle=True):
        start = time.perf_counter()
        reply = self.ask("execute_request", {"code": CELL, "silent": False, "store_history": True,
                                             "user_expressions": {}, "allow_stdin": False}, needs_idle)
        seconds = time.perf_counter() - start
        if reply["status"] != "ok":
            raise RuntimeError(f"the cell failed: {reply}")
        return seconds

    def ask(self, kind, content, needs_idle):
        """Sends a request and returns the reply, once its idle has come too."""
        sent = self.session.send(self.shell, kind, content)["header"]["msg_id"]
        reply, idle = None, not needs_idle
        while reply is None or not idle:
            arrived = self.poller.poll(LIMIT * 1000)
            if not arrived:
                raise TimeoutError(f"no answer to {kind} within {LIMIT} s")
            for socket, _ in arrived:
                _, message = self.session.recv(socket)
                if message["parent_header"].get("msg_id") != sent:
                    continue
                if socket is self.shell:
                    reply = message["content"]
                elif message["msg_type"] == "status":
                    idle |= message["content"]["execution_state"] == "idle"
        return reply

    def block(self, cells):
        return [self.cell() for _ in range(cells)]

    def close(self):
        self.process.terminate()
        self.process.wait(LIMIT)
        self.shell.close(0)
        self.iopub.close(0)
        self.folder.cleanup()


class InProcess:
    """JShell in a process of its own, so that each session's compiler is as warm as its own cells have made it."""

    def __init__(self, java, class_path, session):
        source = pathlib.Path(__file__).with_name("InProcess.java")
        self.process = subprocess.Popen([java, "-XX:+UseSerialGC", "-cp", class_path, str(source), session, CELL],
                                        stdin=subprocess.PIPE, stdout=subprocess.PIPE, text=True)

    def block(self, cells):
        self.process.stdin.write(f"{cells}\n")
        self.process.stdin.flush()
        return [int(word) / 1e9 for word in self.process.stdout.readline().split()]

    def close(self):
        self.process.stdin.close()
        self.process.wait(10)


def milliseconds(seconds):
    return f"{seconds * 1e3:8.1f}"


def main():
    options = argparse.ArgumentParser(description=__doc__)
    options.add_argument("home", type=pathlib.Path, help="the built distribution")
    options.add_argument("--java", default="java")
    options.add_argument("--cells", type=int, default=400, help="cells measured in each session")
    options.add_argument("--block", type=int, default=20, help="cells a turn")
    options.add_argument("--warm", type=int, default=1500,
                         help="cells before measuring, so that all have settled: HotSpot compiles javac for long")
    chosen = options.parse_args()

    worker = os.pathsep.join(str(jar) for jar in sorted((chosen.home / "lib/worker").glob("*.jar")))
    ours = Kernel([str(chosen.home / "bin/countwright"), "connect", "{connection_file}"])
    kernels = {"Countwright, over ZeroMQ": ours}
    try:
        import ipykernel
        kernels[f"Python kernel (ipykernel {ipykernel.__version__}), over ZeroMQ"] = Kernel(
            [sys.executable, "-m", "ipykernel_launcher", "-f", "{connection_file}"])
    except ImportError:
        print("The Python kernel is left out: there is no ipykernel in", sys.executable)
    base = "JShell in-process, same imports: eval"
    sessions = {
        name: InProcess(chosen.java, worker, session) for name, session in (
            (base, "imports"),
            ("JShell in-process, same imports: analysis + eval", "imports-analysed"),
            ("JShell in-process, no imports: eval", "bare"))}
    sessions.update(kernels)
    for session in sessions.values():
        session.block(chosen.warm)
    times = {name: [] for name in sessions}
    for _ in range(-(-chosen.cells // chosen.block)):
        for name, session in sessions.items():
            times[name] += session.block(chosen.block)

    medians = {name: statistics.median(values) for name, values in times.items()}
    version = subprocess.run([chosen.java, "-version"], capture_output=True, text=True).stderr.splitlines()[0]
    print(f"The cell {CELL}, {len(times[base])} times in each session after {chosen.warm} to warm up; {os.cpu_count()} cores, "
          f"load {os.getloadavg()[0]:.1f}; {version}")
    print(f"{'':58}{'median ms':>10}{'quarter':>9}{'three q.':>9}{'ratio':>7}")
    for name, values in times.items():
        low, _, high = statistics.quantiles(values, n=4)
        print(f"{name:58}{milliseconds(medians[name]):>10}{milliseconds(low):>9}{milliseconds(high):>9}"
              f"{medians[name] / medians[base]:7.2f}")
    print()
    print(f"{'From the start of the process':58}{'ready ms':>10}{'first result ms':>18}")
    for name, kernel in kernels.items():
        print(f"{name:58}{milliseconds(kernel.ready):>10}{milliseconds(kernel.first):>18}")
    for session in sessions.values():
        session.close()


main()
