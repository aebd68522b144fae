"""Hostile peers and a clean end, against the program itself.

Usage: peers.py PROGRAM
Starts the program on loopback with short bounds and plays the peers that a service meets: silent, slow, greedy, crowding, gone. A normal
client must be served throughout. Then ends it by SIGTERM under load. Every loop has an end.
"""

import http.client
import json
import pathlib
import re
import signal
import socket
import subprocess
import sys
import tempfile
import threading
import time

SECONDS = 2  # bound on header, body and stall given to the program
SLOW_PEERS = 120  # of each kind
CONNECTIONS = 600


class Program:
    """The running program."""

    def __init__(self, path, folder, *arguments):
        out = folder / f"out-{len(list(folder.iterdir()))}"
        command = [path, "serve", "--listen", "127.0.0.1:0", "--data", str(folder / "data"), *arguments]
        self.process = subprocess.Popen(command, stdout=out.open("wb"), stderr=subprocess.DEVNULL)
        self.port = None
        for _ in range(200):
            found = re.search(r"http://127\.0\.0\.1:(\d+)/", out.read_text())
            if found:
                self.port = int(found[1])
                return
            time.sleep(0.05)
        raise AssertionError("the program does not say where it serves")

    def connect(self, data=b""):
        stream = socket.create_connection(("127.0.0.1", self.port), timeout=30)
        stream.sendall(data)
        return stream

    def resident_mib(self):
        text = pathlib.Path(f"/proc/{self.process.pid}/status").read_text()
        return int(re.search(r"VmRSS:\s+(\d+)", text)[1]) / 1024

    def files(self):
        return len(list(pathlib.Path(f"/proc/{self.process.pid}/fd").iterdir()))

    def ask(self, method, path, body=None):
        client = http.client.HTTPConnection("127.0.0.1", self.port, timeout=30)
        try:
            client.request(method, path, body, {"Content-Type": "application/json"} if body else {})
            answer = client.getresponse()
            return answer.status, answer.headers.get("Content-Type"), answer.read()
        finally:
            client.close()

    def terminate(self, seconds):
        """Ends the program by SIGTERM; how long that took."""
        begun = time.monotonic()
        self.process.send_signal(signal.SIGTERM)
        status = self.process.wait(timeout=seconds)
        assert status == 0, f"ended with status {status}"
        return time.monotonic() - begun


def closed_after(stream, begun, seconds):
    """Reads until the peer closes; seconds since `begun`, and what came."""
    stream.settimeout(seconds)
    received = b""
    try:
        while chunk := stream.recv(65536):
            received += chunk
    except ConnectionResetError:
        pass
    return time.monotonic() - begun, received


def slow_peers(program, point):
    """Crowds of silent and half-sent requests are all closed in time, and a normal client does not notice them."""
    head = b"POST /v1/operating-point HTTP/1.1\r\nHost: mainstay\r\n"
    kinds = {
        "silence": b"",
        "half a header": head + b"X-Half: ",
        "half a body": head + b"Content-Type: application/json\r\nContent-Length: 1000\r\n\r\n{",
    }
    begun = time.monotonic()
    held = [(kind, program.connect(data)) for kind, data in kinds.items() for _ in range(SLOW_PEERS)]
    slowest = 0.0
    for _ in range(20):
        asked = time.monotonic()
        assert program.ask("POST", "/v1/operating-point", point)[0] == 200
        slowest = max(slowest, time.monotonic() - asked)
    longest = {}
    for kind, stream in held:
        with stream:
            seconds, received = closed_after(stream, begun, 30)
        longest[kind] = max(longest.get(kind, 0.0), seconds)
        if kind == "half a body":
            assert received.startswith(b"HTTP/1.1 408 ") and b"/problems/request-timeout" in received, received[:200]
    for kind, seconds in longest.items():
        assert seconds < 4 * SECONDS + 2, f"{kind}: closed after {seconds:.1f} s"
    assert slowest < 3, f"a normal client waited {slowest:.1f} s"
    told = ", ".join(f"{kind} {seconds:.1f} s" for kind, seconds in longest.items())
    print(f"{len(held)} slow peers closed ({told}); a normal client waited {slowest:.2f} s at most")


def bad_bytes(program):
    """Bytes that are no request are refused, and the service goes on."""
    for data in [
        b"\r\n\r\n\r\n\r\n",
        b"\x16\x03\x01\x02\x00\x01\x00\x01\xfc\x03\x03",
        b"GET / HTTP/9.9\r\n\r\n",
        b"GET /" + b"x" * 100_000 + b" HTTP/1.1\r\nHost: m\r\n\r\n",
        b"GET / HTTP/1.1\r\n" + b"X-Many: 1\r\n" * 1000 + b"\r\n",
        b"GET / HTTP/1.1\r\nHost: m\r\nX-Long: " + b"y" * 1_000_000 + b"\r\n\r\n",
        b"POST /v1/sweep HTTP/1.1\r\nHost: m\r\nContent-Length: -1\r\n\r\n",
        b"POST /v1/sweep HTTP/1.1\r\nHost: m\r\nContent-Length: 5\r\nContent-Length: 6\r\n\r\nhello",
        b"POST /v1/sweep HTTP/1.1\r\nHost: m\r\nTransfer-Encoding: chunked\r\n\r\nzz\r\n",
        b"GET /%ff%fe HTTP/1.1\r\nHost: m\r\nConnection: close\r\n\r\n",
    ]:
        begun = time.monotonic()
        try:
            with program.connect() as stream:
                stream.sendall(data)
                seconds, received = closed_after(stream, begun, 30)
        except (BrokenPipeError, ConnectionResetError):
            received, seconds = b"", time.monotonic() - begun
        status = received[9:12]
        assert status[:1] in (b"", b"4"), f"{data[:40]!r} got {received[:60]!r}"
        assert seconds < 4 * SECONDS + 2, f"{data[:40]!r} held for {seconds:.1f} s"
    assert program.ask("GET", "/livez")[0] == 200
    print("10 kinds of bytes that are no request were refused")


def crowd(program, point):
    """More requests than the bound at once: each is answered or refused with a problem, and health answers."""
    statuses, lock = {}, threading.Lock()

    def work():
        for _ in range(8):
            status, kind, _ = program.ask("POST", "/v1/operating-point", point)
            assert status == 200 or (status, kind) == (503, "application/problem+json"), (status, kind)
            with lock:
                statuses[status] = statuses.get(status, 0) + 1

    threads = [threading.Thread(target=work) for _ in range(40)]
    for thread in threads:
        thread.start()
    slowest = 0.0
    for _ in range(10):
        begun = time.monotonic()
        assert program.ask("GET", "/livez")[0] == 200
        slowest = max(slowest, time.monotonic() - begun)
    for thread in threads:
        thread.join(120)
    assert sum(statuses.values()) == 320, f"answers are missing: {statuses}"
    assert statuses.get(200, 0) > 0 and slowest < 2, (statuses, slowest)
    print(f"40 clients at once: {dict(sorted(statuses.items()))}; health answered within {slowest:.2f} s")


def steady(program, point):
    """Many connections and requests leave nothing behind."""
    for _ in range(100):
        program.ask("POST", "/v1/operating-point", point)
    files, resident = program.files(), program.resident_mib()
    for number in range(CONNECTIONS):
        if number % 3 == 0:
            program.connect(b"GET /livez HTTP/1.1\r\nHost: ").close()
        else:
            assert program.ask("POST", "/v1/operating-point", point)[0] == 200
    time.sleep(SECONDS + 1)
    grown = program.resident_mib() - resident
    assert program.files() <= files + 5, f"{program.files()} open files after {files}"
    assert grown < 24, f"the resident set grew by {grown:.1f} MiB"
    print(f"{CONNECTIONS} connections later: {program.files()} open files, resident set {program.resident_mib():.0f} MiB ({grown:+.1f})")


def clean_end(path, folder, document, point):
    """SIGTERM under load, with half a header and a sweep that nobody reads: requests in hand are answered, the rest is cut in time."""
    program = Program(path, folder, "--drain-seconds-maximum", "3", "--connections-maximum", "40")
    sweep = dict(document["paths"]["/v1/sweep"]["post"]["requestBody"]["content"]["application/json"]["example"])
    sweep.pop("random", None)
    axes = [("/line/voltage", "200 V", "250 V"), ("/line/frequency", "49 Hz", "51 Hz")]
    sweep["axes"] = [{"pointer": p, "from": a, "to": b, "points": 2000} for p, a, b in axes]
    text = json.dumps(sweep).encode()
    head = b"POST /v1/sweep HTTP/1.1\r\nHost: m\r\nContent-Type: application/json\r\nContent-Length: %d\r\n\r\n" % len(text)
    unread = program.connect(head + text)
    assert unread.recv(15) == b"HTTP/1.1 200 OK", "the sweep does not begin"
    half = program.connect(b"GET /livez HTTP/1.1\r\nHost: ")
    begun_request = b"POST /v1/operating-point HTTP/1.1\r\nHost: m\r\nContent-Type: application/json\r\nContent-Length: %d\r\n\r\n" % len(point)
    in_hand = [program.connect(begun_request + point[:-1]) for _ in range(10)]
    time.sleep(0.3)
    program.process.send_signal(signal.SIGTERM)
    time.sleep(0.3)
    for stream in in_hand:
        stream.sendall(point[-1:])
    answered = sum(closed_after(stream, 0, 20)[1].startswith(b"HTTP/1.1 200 ") for stream in in_hand)
    seconds = program.terminate(20)
    assert answered == len(in_hand), f"{answered} of {len(in_hand)} requests in hand were answered"
    assert seconds < 8, f"ended after {seconds:.1f} s"
    unread.close()
    half.close()
    print(f"SIGTERM under load: {answered} of {len(in_hand)} requests in hand answered, ended within {seconds:.1f} s, status 0")


def main():
    path = sys.argv[1]
    bounds = [f"--{name}-seconds-maximum={SECONDS}" for name in ("header", "body", "stall")]
    with tempfile.TemporaryDirectory() as name:
        folder = pathlib.Path(name)
        program = Program(path, folder, *bounds)
        small = Program(path, folder, *bounds, "--requests-maximum=16")
        try:
            document = json.loads(program.ask("GET", "/openapi.json")[2])
            content = document["paths"]["/v1/operating-point"]["post"]["requestBody"]["content"]
            point = json.dumps(content["application/json"]["example"]).encode()
            bad_bytes(program)
            slow_peers(program, point)
            crowd(small, point)
            small.terminate(10)
            steady(program, point)
            print(f"idle, it ends within {program.terminate(10):.1f} s")
            clean_end(path, folder, document, point)
        finally:
            program.process.kill()
            small.process.kill()


if __name__ == "__main__":
    main()
