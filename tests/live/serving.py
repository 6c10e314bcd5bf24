"""Start `faying try` as a user would, and talk to it as its page, or as nobody's page, would."""

import http.client
import json
import os
import re
import signal
import subprocess
import sys
from contextlib import contextmanager

COMMAND = [sys.executable, "-P", "-c", "from reports.command import main; main()", "try", "--no-browser"]


class Served:
    """A running server."""

    def __init__(self, process, folder):
        self.process, self.folder = process, folder
        self.address = process.stdout.readline().strip()
        found = re.fullmatch(r"http://127\.0\.0\.1:(\d+)/\?token=([\w-]+)", self.address)
        assert found, self.address
        self.port, self.token = int(found[1]), found[2]
        self.host = f"127.0.0.1:{self.port}"

    def headers(self, **changed):
        """Return the headers of the page; None leaves one out, `_` stands for `-`."""
        own = {"Host": self.host, "Origin": f"http://{self.host}", "X-Faying-Token": self.token, "X-Faying-Page": "own"}
        own |= {key.replace("_", "-"): value for key, value in changed.items()}
        return {key: value for key, value in own.items() if value is not None}

    def ask(self, method, path, body=None, timeout=30, **changed):
        """Return status and text of one request."""
        connection = http.client.HTTPConnection("127.0.0.1", self.port, timeout=timeout)
        try:
            text = json.dumps(body) if isinstance(body, dict) else body
            connection.request(method, path, text, self.headers(**changed))
            answer = connection.getresponse()
            return answer.status, answer.read().decode()
        finally:
            connection.close()

    def answer(self, document, task="answer", **more):
        """Return what the page would get for a case."""
        status, text = self.ask("POST", f"/ask/{task}", {"document": document, **more}, timeout=90)
        assert status == 200, text
        return json.loads(text)

    def children(self):
        """Return the processes of the server's own making."""
        found = subprocess.run(["ps", "-o", "pid=", "--ppid", str(self.process.pid)], capture_output=True, text=True)
        return [int(pid) for pid in found.stdout.split() if os.path.exists(f"/proc/{pid}")]


@contextmanager
def served(folder, *arguments):
    """Run `faying try` in a folder until the block ends."""
    process = subprocess.Popen(
        [*COMMAND, *arguments], cwd=folder, stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True
    )
    try:
        yield Served(process, folder)
    finally:
        if process.poll() is None:
            process.send_signal(signal.SIGINT)
        try:
            process.communicate(timeout=15)
        except subprocess.TimeoutExpired:
            process.kill()
            process.communicate()
