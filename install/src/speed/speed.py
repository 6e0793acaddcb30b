"""How quick the kernel is, in one run on one machine: cells through the kernel over ZeroMQ, beside JShell in one process
and beside the reference Python kernel; the start of each; and a soak of ten thousand cells. The same client measures both
kernels, from execute_request sent until execute_reply and idle are both there. What is compared takes turns in short
blocks, so that a noisy machine treats all alike; medians and their ratios are printed.
"""

import argparse
import os
import pathlib
import secrets
import statistics
import subprocess
import sys
import tempfile
import time

TRIVIAL = "1+1"
TEN = """int[] counts = {3, 1, 4, 1, 5, 9, 2, 6};
double exposure = 120.5;
int total = 0;
for (int count : counts) total += count;
double rate = total / exposure;
String label = "rate " + rate;
Map<String, Double> rates = new TreeMap<>();
rates.put(label, rate);
if (rate > 1) throw new IllegalStateException(label);
rates"""
LIMIT = 120
WIDE = 64


class Kernel:
    """A kernel process, and the reference client's sockets and session, read without its queues: they cost time of
    their own that is no kernel's."""

    def __init__(self, command, cell):
        import zmq
        from jupyter_client.blocking import BlockingKernelClient
        from jupyter_client.connect import write_connection_file

        self.code = cell
        self.folder = tempfile.TemporaryDirectory()
        path = os.path.join(self.folder.name, "connection.json")
        write_connection_file(path, key=secrets.token_hex(32).encode())
        client = BlockingKernelClient(connection_file=path)
        client.load_connection_file()
        self.session = client.session
        start = time.perf_counter()
        self.process = subprocess.Popen([word.replace("{connection_file}", path) for word in command],
                                        stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
        self.shell = client.connect_shell()
        self.iopub = client.connect_iopub()
        self.poller = zmq.Poller()
        self.poller.register(self.shell, zmq.POLLIN)
        self.poller.register(self.iopub, zmq.POLLIN)
        self.ask("kernel_info_request", {}, needs_idle=False)
        self.ready = time.perf_counter() - start
        self.run(cell, needs_idle=False)
        self.first = time.perf_counter() - start
        # What was published before the subscription counted is lost; now it counts.
        self.run(cell)

    def run(self, code, needs_idle=True):
        start = time.perf_counter()
        reply = self.ask("execute_request", {"code": code, "silent": False, "store_history": True,
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
        return [self.run(self.code) for _ in range(cells)]

    def processes(self):
        """The kernel and its workers, which are its children."""
        tasks = pathlib.Path(f"/proc/{self.process.pid}/task")
        children = [int(pid) for task in tasks.iterdir() for pid in (task / "children").read_text().split()]
        return [self.process.pid] + children

    def megabytes(self):
        """Resident memory of the kernel and of its workers, the one in reserve included, after a full collection:
        garbage is not growth."""
        pids = self.processes()
        for pid in pids:
            subprocess.run(["jcmd", str(pid), "GC.run"], stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
        time.sleep(1)
        return [resident(pids[0]), sum(resident(pid) for pid in pids[1:])]

    def close(self):
        self.process.terminate()
        self.process.wait(LIMIT)
        self.shell.close(0)
        self.iopub.close(0)
        self.folder.cleanup()


class InProcess:
    """JShell in a process of its own, so that each session's compiler is as warm as its own cells have made it."""

    def __init__(self, java, classes, libraries, session, cell):
        self.folder = tempfile.TemporaryDirectory()
        path = os.path.join(self.folder.name, "cell.txt")
        pathlib.Path(path).write_text(cell)
        start = time.perf_counter()
        self.process = subprocess.Popen(
            [java, "-XX:+UseSerialGC", "-cp", classes + os.pathsep + libraries, "InProcess", session, path],
            stdin=subprocess.PIPE, stdout=subprocess.PIPE, text=True)
        self.process.stdout.readline()
        self.first = time.perf_counter() - start

    def block(self, cells):
        self.process.stdin.write(f"{cells}\n")
        self.process.stdin.flush()
        return [int(word) / 1e9 for word in self.process.stdout.readline().split()]

    def close(self):
        self.process.stdin.close()
        self.process.wait(10)
        self.folder.cleanup()


def resident(pid):
    for line in pathlib.Path(f"/proc/{pid}/status").read_text().splitlines():
        if line.startswith("VmRSS:"):
            return int(line.split()[1]) / 1024
    return 0.0


def ms(seconds):
    return f"{seconds * 1e3:9.1f}"


def table(title, times, base, limit):
    """Prints medians, quartiles and the ratio of each to the base."""
    print(f"\n{title}")
    print(f"{'':{WIDE}}{'median ms':>10}{'quarter':>9}{'three q.':>9}{'ratio':>7}")
    reference = statistics.median(times[base])
    for name, values in times.items():
        low, middle, high = statistics.quantiles(values, n=4)
        print(f"{name:{WIDE}}{ms(middle):>10}{ms(low):>9}{ms(high):>9}{middle / reference:7.2f}")
    ours = statistics.median(times["Countwright"]) / reference
    print(f"Countwright / {base}: {ours:.2f} (goal: at most {limit})")


def cells(title, cell, limit, open_kernel, open_python, open_in_process, chosen):
    sessions = {"JShell in-process, same imports": open_in_process("imports", cell),
                "JShell in-process, no imports" if cell == TRIVIAL else "": open_in_process("bare", cell)
                if cell == TRIVIAL else None,
                "Countwright": open_kernel(cell)}
    if cell == TRIVIAL:
        sessions["Python kernel"] = open_python(cell)
    sessions = {name: session for name, session in sessions.items() if session is not None}
    for session in sessions.values():
        session.block(chosen.warm)
    times = {name: [] for name in sessions}
    for _ in range(-(-chosen.cells // chosen.block)):
        for name, session in sessions.items():
            times[name] += session.block(chosen.block)
    table(f"{title}, {chosen.cells} times in each session after {chosen.warm} to warm up", times,
          "JShell in-process, same imports", limit)
    for session in sessions.values():
        session.close()


def starts(open_kernel, open_python, open_in_process, chosen):
    ready = {"Python kernel": [], "Countwright": []}
    first = {"JShell in-process, no imports": [], "JShell in-process, same imports": [], "Python kernel": [],
             "Countwright": []}
    for _ in range(chosen.starts):
        for name, open_one in ("Python kernel", open_python), ("Countwright", open_kernel):
            kernel = open_one(TRIVIAL)
            ready[name].append(kernel.ready)
            first[name].append(kernel.first)
            kernel.close()
        for session, name in ("bare", "no imports"), ("imports", "same imports"):
            alone = open_in_process(session, TRIVIAL)
            first[f"JShell in-process, {name}"].append(alone.first)
            alone.close()
    table(f"From spawn to kernel_info, {chosen.starts} starts each", ready, "Python kernel", 0.7)
    table(f"From spawn to the first result, {chosen.starts} starts each", first, "JShell in-process, no imports", 1.0)


def soak(open_kernel, chosen):
    kernel = open_kernel(TRIVIAL)
    script = ["int total = 0;", "total += 1;", "total", "var text = \"cell \" + total;", "text.length() * 2",
              "for (int i = 0; i < 10; i++) { total += i; }", "List.of(total, 2, 3).stream().mapToInt(x -> x).sum()",
              "double rate = total / 7.0;", "System.out.println(rate)", "String.format(\"%.3f\", rate)"]
    kernel.block(200)
    # Until the worker in reserve is there and has warmed up.
    time.sleep(8)
    before = kernel.megabytes()
    times = [kernel.run(script[i % len(script)]) for i in range(chosen.soak)]
    after = kernel.megabytes()
    tenth = max(1, chosen.soak // 10)
    early, late = statistics.median(times[:tenth]), statistics.median(times[-tenth:])
    growth = [b - a for a, b in zip(before, after)]
    print(f"\nSoak: {chosen.soak} cells of {len(script)} kinds in one session")
    print(f"median of the first tenth {ms(early)} ms, of the last {ms(late)} ms: {late / early:.2f} (goal: at most 1.2)")
    print(f"resident memory: kernel {before[0]:.0f} -> {after[0]:.0f} MB, workers {before[1]:.0f} -> {after[1]:.0f} MB; "
          f"grown by {growth[0]:+.0f} and {growth[1]:+.0f} MB, together {sum(growth):+.0f} (goal: under 60)")
    fresh = statistics.median(kernel.block(100))
    for i in range(0, 1000, 50):
        kernel.run("\n".join(f"double value{j} = {j};" for j in range(i, i + 50)))
    crowded = statistics.median(kernel.block(100))
    named = statistics.median([kernel.run(f"value{i} + value{999 - i}") for i in range(100)])
    print(f"the cell {TRIVIAL} in the same session {ms(fresh)} ms, with 1,000 variables more {ms(crowded)} ms: "
          f"{crowded / fresh:.2f}; a sum of two of them {ms(named)} ms")
    kernel.close()


def main():
    options = argparse.ArgumentParser(description=__doc__)
    options.add_argument("home", type=pathlib.Path, help="the built distribution")
    options.add_argument("--java", default="java")
    options.add_argument("--cells", type=int, default=400, help="cells measured in each session")
    options.add_argument("--block", type=int, default=20, help="cells a turn")
    options.add_argument("--warm", type=int, default=400, help="cells before measuring: HotSpot compiles javac for long")
    options.add_argument("--starts", type=int, default=9, help="starts of each kind")
    options.add_argument("--soak", type=int, default=10_000, help="cells of the soak")
    chosen = options.parse_args()

    libraries = os.pathsep.join(str(jar) for jar in sorted((chosen.home / "lib/worker").glob("*.jar")))
    javac = chosen.java[:-len("java")] + "javac"
    with tempfile.TemporaryDirectory() as classes, tempfile.TemporaryDirectory() as scratch:
        # As after a registration: class-data archives made, the history kept; but nothing of it at home.
        os.environ["XDG_CACHE_HOME"] = scratch
        os.environ["COUNTWRIGHT_HISTORY"] = os.path.join(scratch, "history")
        subprocess.run([str(chosen.home / "bin/countwright"), "register", "--prefix", scratch],
                       stdout=subprocess.DEVNULL, check=True)
        subprocess.run([javac, "-d", classes, str(pathlib.Path(__file__).with_name("InProcess.java"))], check=True)

        def open_kernel(cell):
            return Kernel([str(chosen.home / "bin/countwright"), "connect", "{connection_file}"], cell)

        def open_python(cell):
            return Kernel([sys.executable, "-m", "ipykernel_launcher", "-f", "{connection_file}"], cell)

        def open_in_process(session, cell):
            return InProcess(chosen.java, classes, libraries, session, cell)

        version = subprocess.run([chosen.java, "-version"], capture_output=True, text=True).stderr.splitlines()[0]
        print(f"{os.cpu_count()} cores, load {os.getloadavg()[0]:.1f}; {version}")
        if chosen.starts:
            starts(open_kernel, open_python, open_in_process, chosen)
        if chosen.cells:
            cells(f"The cell {TRIVIAL}", TRIVIAL, 1.15, open_kernel, open_python, open_in_process, chosen)
            cells("A cell of ten statements", TEN, 1.0, open_kernel, open_python, open_in_process, chosen)
        if chosen.soak:
            soak(open_kernel, chosen)
        print(f"\nload at the end {os.getloadavg()[0]:.1f}")


main()
