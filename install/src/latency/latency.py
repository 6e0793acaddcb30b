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
    """A kernel process and its client."""

    def __init__(self, name, command):
        from jupyter_client.connect import write_connection_file
        from jupyter_client.blocking import BlockingKernelClient

        self.folder = tempfile.TemporaryDirectory()
        path = os.path.join(self.folder.name, "connection.json")
        write_connection_file(path)
        start = time.perf_counter()
        self.process = subprocess.Popen([word.replace("{connection_file}", path) for word in command],
                                        stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
        self.client = BlockingKernelClient(connection_file=path)
        self.client.load_connection_file()
        self.client.start_channels(stdin=False)
        self.reply(self.client.kernel_info())
        self.ready = time.perf_counter() - start
        # A subscription counts from some moment on; until a cell's idle is heard, none has.
        self.client.wait_for_ready(timeout=LIMIT)
        self.cell()
        self.first = time.perf_counter() - start

    def cell(self):
        start = time.perf_counter()
        sent = self.client.execute(CELL, allow_stdin=False)
        status = self.reply(sent)["content"]["status"]
        if status != "ok":
            raise RuntimeError("the cell failed")
        self.idle(sent)
        return time.perf_counter() - start

    def reply(self, sent):
        while True:
            message = self.client.get_shell_msg(timeout=LIMIT)
            if message["parent_header"].get("msg_id") == sent:
                return message

    def idle(self, sent):
        while True:
            message = self.client.get_iopub_msg(timeout=LIMIT)
            if (message["parent_header"].get("msg_id") == sent and message["msg_type"] == "status"
                    and message["content"]["execution_state"] == "idle"):
                return

    def block(self, cells):
        return [self.cell() for _ in range(cells)]

    def close(self):
        self.client.shutdown()
        try:
            self.process.wait(10)
        except subprocess.TimeoutExpired:
            self.process.kill()
        self.client.stop_channels()
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
    options.add_argument("--warm", type=int, default=200, help="cells before measuring")
    chosen = options.parse_args()

    worker = os.pathsep.join(str(jar) for jar in sorted((chosen.home / "lib/worker").glob("*.jar")))
    ours = Kernel("countwright", [str(chosen.home / "bin/countwright"), "connect", "{connection_file}"])
    kernels = {"Countwright, over ZeroMQ": ours}
    try:
        import ipykernel
        kernels[f"Python kernel (ipykernel {ipykernel.__version__}), over ZeroMQ"] = Kernel(
            "python", [sys.executable, "-m", "ipykernel_launcher", "-f", "{connection_file}"])
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
    print(f"The cell {CELL}, {len(times[base])} times in each session; {os.cpu_count()} cores, "
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
