"""Scenes in which the reference client talks to the registered kernel. RealClientTest plays them one by one:

    python reference_client.py SCENE [ARGUMENT...]

A scene that goes wrong ends with status 1 and says what was expected and what was seen. JUPYTER_PATH leads to the
kernelspec.
"""

import os
import sys
import tempfile
import time
from contextlib import contextmanager
from queue import Empty

from jupyter_client.kernelspec import KernelSpecManager, NoSuchKernel
from jupyter_client.manager import KernelManager

NAME = "countwright"
LIMIT = 120


def check(holds, expected, seen):
    if not holds:
        print(f"expected {expected}, but saw: {seen!r}", file=sys.stderr)
        sys.exit(1)


class Session:
    """One client of one kernel, one request at a time."""

    def __init__(self, manager):
        self.manager = manager
        self.client = manager.client()
        self.client.start_channels()
        self.client.wait_for_ready(timeout=LIMIT)

    def reply_to(self, sent):
        while True:
            message = self.client.get_shell_msg(timeout=LIMIT)
            if message["parent_header"].get("msg_id") == sent:
                return message["content"]

    def published_for(self, sent, until=lambda message: False):
        """What is published for a request, up to its idle or to the message looked for."""
        heard = []
        while True:
            message = self.client.get_iopub_msg(timeout=LIMIT)
            if message["parent_header"].get("msg_id") != sent:
                continue
            heard.append((message["msg_type"], message["content"]))
            if until(message) or heard[-1] == ("status", {"execution_state": "idle"}):
                return heard

    def run(self, code, **options):
        sent = self.client.execute(code, **options)
        reply = self.reply_to(sent)
        return reply, self.published_for(sent)

    def value(self, code):
        reply, published = self.run(code)
        check(reply["status"] == "ok", f"{code} to run", reply)
        return next(content["data"]["text/plain"] for kind, content in published if kind == "execute_result")


@contextmanager
def session():
    manager = KernelManager(kernel_name=NAME)
    manager.start_kernel()
    try:
        opened = Session(manager)
        yield opened
        opened.client.stop_channels()
    finally:
        manager.shutdown_kernel(now=True)


def seen():
    spec = KernelSpecManager().get_kernel_spec(NAME)
    check(spec.display_name == "Countwright (Java)", "the display name", spec.display_name)
    check(spec.language == "java", "the language", spec.language)
    check(spec.interrupt_mode == "message", "interrupts by message", spec.interrupt_mode)


def not_seen():
    try:
        spec = KernelSpecManager().get_kernel_spec(NAME)
    except NoSuchKernel:
        return
    check(False, "no kernelspec", spec.argv)


def kernel_info():
    with session() as kernel:
        info = kernel.reply_to(kernel.client.kernel_info())
    check(info["status"] == "ok" and info["implementation"] == NAME, "this kernel", info)
    check(info["protocol_version"].startswith("5."), "a protocol version 5", info)
    language = info["language_info"]
    check(language["name"] == "java" and language["file_extension"] == ".java", "Java", language)
    check(language["mimetype"] and language["version"] and info["banner"], "all fields filled", info)


def ipc():
    """Over Unix domain sockets, which are for this user only and gone at the end."""
    with tempfile.TemporaryDirectory() as folder:
        manager = KernelManager(kernel_name=NAME, transport="ipc", ip=os.path.join(folder, "k"))
        manager.start_kernel()
        try:
            kernel = Session(manager)
            modes = [oct(os.stat(os.path.join(folder, name)).st_mode) for name in os.listdir(folder)]
            check(modes == ["0o140600"] * 5, "five sockets for their owner only", modes)
            check(kernel.value("6 * 7") == "42", "42", "another value")
            check(kernel.client.is_alive(), "a heartbeat", "none")
            sent = kernel.client.execute("while (true) { }")
            kernel.published_for(sent, until=lambda message: message["msg_type"] == "execute_input")
            manager.interrupt_kernel()
            check(kernel.reply_to(sent)["status"] == "error", "the loop to be interrupted", "no error")
            kernel.client.stop_channels()
            manager.shutdown_kernel()
        finally:
            if manager.has_kernel:
                manager.shutdown_kernel(now=True)
        check(os.listdir(folder) == [], "no socket to be left", os.listdir(folder))


def rich_display():
    with session() as kernel:
        reply, published = kernel.run(
            'System.out.println("told"); show(Table.of(numbers("faults", 3, 5)));\n'
            'Charts.rates(Table.of(texts("depot", "A", "B"), numbers("n", 3, 5), numbers("km", 10, 9)),'
            ' "n", "km", "depot")')
        missing, wrong = kernel.run("nowhere + 1")
    check(reply["status"] == "ok" and reply["execution_count"] == 1, "the first cell to run", reply)
    kinds = [kind for kind, _ in published]
    check(kinds[:2] == ["status", "execute_input"] and kinds[-1] == "status", "the usual order", kinds)
    told = "".join(content["text"] for kind, content in published if kind == "stream")
    check(told == "told\n", "the printed line", told)
    shown = next(content["data"] for kind, content in published if kind == "display_data")
    check("<table" in shown["text/html"] and "faults" in shown["text/plain"], "a table as HTML and text", shown)
    chart = next(content for kind, content in published if kind == "execute_result")
    check({"image/png", "image/svg+xml", "text/plain"} <= set(chart["data"]), "a picture", list(chart["data"]))
    check(chart["metadata"]["image/png"]["width"] > 0, "its display size", chart["metadata"])
    check(missing["status"] == "error" and "nowhere" in missing["evalue"], "an error that names it", missing)
    check("error" in [kind for kind, _ in wrong], "a published error", wrong)


def stdin():
    with session() as kernel:
        sent = kernel.client.execute('"Depot " + ask("Which depot?")', allow_stdin=True)
        question = kernel.client.get_stdin_msg(timeout=LIMIT)["content"]
        check(question == {"prompt": "Which depot?", "password": False}, "the question", question)
        kernel.client.input("Harbour")
        check(kernel.reply_to(sent)["status"] == "ok", "the cell to end", sent)
        result = next(content for kind, content in kernel.published_for(sent) if kind == "execute_result")
        check("Depot Harbour" in result["data"]["text/plain"], "the answer in the cell", result)
        refused, _ = kernel.run('ask("Which depot?")', allow_stdin=False)
        check(refused["status"] == "error", "no question where none can be asked", refused)


def questions():
    """complete, inspect, is_complete and history."""
    with session() as kernel:
        kernel.run("int vehicles = 12")
        complete = kernel.reply_to(kernel.client.complete("1 + vehi"))
        check("vehicles" in complete["matches"], "the completion", complete)
        check((complete["cursor_start"], complete["cursor_end"]) == (4, 8), "the word's place", complete)
        inspect = kernel.reply_to(kernel.client.inspect("vehicles", 4))
        check(inspect["found"] and "int" in inspect["data"]["text/plain"], "the variable's type", inspect)
        for code, expected in (("1 + 1", "complete"), ("if (true) {", "incomplete"), ("foo(]", "invalid")):
            judged = kernel.reply_to(kernel.client.is_complete(code))["status"]
            check(judged == expected, f"{code} to be {expected}", judged)
        history = kernel.reply_to(kernel.client.history(hist_access_type="tail", n=5, raw=True))["history"]
        check([entry[2] for entry in history] == ["int vehicles = 12"], "the one cell", history)


def interrupt():
    with session() as kernel:
        kernel.run("int kept = 7")
        sent = kernel.client.execute('System.out.println("on"); while (true) {}')
        kernel.published_for(sent, until=lambda message: message["msg_type"] == "stream")
        kernel.manager.interrupt_kernel()
        reply = kernel.reply_to(sent)
        check(reply["status"] == "error" and "nterrupted" in reply["ename"], "an interrupted cell", reply)
        kernel.published_for(sent)
        check(kernel.value("kept") == "7", "the variable to be kept", reply)


def shutdown():
    import psutil  # the reference kernel brings it

    with session() as kernel:
        kernel.value("1 + 1")
        family = psutil.Process(kernel.manager.provisioner.process.pid)
        processes = [family, *family.children(recursive=True)]
        check(len(processes) >= 2, "a kernel and its worker", processes)
        sent = kernel.client.shutdown()
        reply = kernel.client.get_control_msg(timeout=LIMIT)
        check(reply["parent_header"]["msg_id"] == sent and reply["content"]["status"] == "ok", "a reply", reply)
        # The kernel is this process's child: it is gone only when waited for.
        deadline = time.monotonic() + LIMIT
        while kernel.manager.is_alive() and time.monotonic() < deadline:
            time.sleep(0.05)
        _, left = psutil.wait_procs(processes, timeout=LIMIT)
        check(not left, "all processes to end", left)


def restart():
    with session() as kernel:
        kernel.run("int before = 1")
        kernel.manager.restart_kernel()
        kernel.client.wait_for_ready(timeout=LIMIT)
        reply, _ = kernel.run("before")
        check(reply["status"] == "error", "the variable to be gone", reply)
        check(kernel.value("2 + 2") == "4", "a working kernel", reply)


def notebook(path, out):
    """The reference runner executes a notebook; the result is valid, without error, and has its charts."""
    import os

    import nbformat
    from nbclient import NotebookClient

    book = nbformat.read(path, as_version=4)
    folder = os.path.dirname(os.path.abspath(path))
    NotebookClient(book, timeout=LIMIT, kernel_name=NAME, resources={"metadata": {"path": folder}}).execute()
    nbformat.validate(book)
    nbformat.write(book, out)
    outputs = [output for cell in book.cells if cell.cell_type == "code" for output in cell.outputs]
    errors = [output for output in outputs if output.output_type == "error"]
    check(not errors, "no error", errors)
    pictures = [output for output in outputs if "image/png" in output.get("data", {})]
    check(len(pictures) >= 3, "three charts", len(pictures))
    empty = [cell.source for cell in book.cells if cell.cell_type == "code" and cell.execution_count is None]
    check(not empty, "every cell to have run", empty)


def main():
    scenes = (seen, not_seen, kernel_info, ipc, rich_display, stdin, questions, interrupt, shutdown, restart,
              notebook)
    scene = {each.__name__: each for each in scenes}[sys.argv[1]]
    try:
        scene(*sys.argv[2:])
    except Empty:
        check(False, f"an answer within {LIMIT} s", "none")


if __name__ == "__main__":
    main()
