"""Long checks of a running server: `memory` (flat over many predictions) and `drain` (SIGTERM under load).

Talks to the loopback server of tests/run.sh only; counts and times are bounded.
"""

import concurrent.futures
import http.client
import json
import os
import pathlib
import signal
import sys
import threading
import time

EXAMPLE = pathlib.Path("openapi/examples/shortest.json")
WORKERS = 4


def resident_kib(pid):
    """Resident memory of a process, from the kernel's own table."""
    for line in pathlib.Path(f"/proc/{pid}/status").read_text().splitlines():
        if line.startswith("VmRSS:"):
            return int(line.split()[1])
    raise RuntimeError(f"process {pid} has no VmRSS")


def predict(host, body):
    """One prediction on a connection of its own: (status, bytes promised, bytes that came)."""
    connection = http.client.HTTPConnection(host, timeout=30)
    try:
        connection.request("POST", "/v1/predictions", body, {"content-type": "application/json"})
        answer = connection.getresponse()
        promised = answer.getheader("content-length")
        return answer.status, promised and int(promised), len(answer.read())
    finally:
        connection.close()


def memory(host, pid, total=10_000, warm_up=1_000, allowed_growth=0.10):
    """Resident memory after `total` predictions against that after `warm_up`."""
    body = EXAMPLE.read_bytes()
    marks = {}
    with concurrent.futures.ThreadPoolExecutor(WORKERS) as pool:
        for done, (status, _, _) in enumerate(pool.map(lambda _: predict(host, body), range(total)), start=1):
            if status not in (200, 503):
                print(f"prediction {done} answered {status}")
                return False
            if done % 1_000 == 0:
                marks[done] = resident_kib(pid)
                print(f"after {done} predictions: {marks[done] / 1024:.1f} MiB resident", flush=True)
    growth = marks[total] / marks[warm_up] - 1
    print(f"growth from {warm_up} to {total}: {growth:+.1%}, allowed {allowed_growth:.0%}")
    return growth <= allowed_growth


def drain(host, pid, before_s=2.0, allowed_s=10.0):
    """SIGTERM while short and long predictions run: no answer cut short, and gone in time."""
    ending, whole, cut, refused = threading.Event(), [], [], []

    def load(body):
        while not ending.is_set():
            try:
                status, promised, came = predict(host, body)
                (whole if promised in (None, came) else cut).append(status)
            except http.client.IncompleteRead:
                cut.append("incomplete")
            except OSError:
                refused.append(1)
                time.sleep(0.05)
            except http.client.HTTPException:
                refused.append(1)

    bodies = [EXAMPLE.read_bytes(), slow_request()]
    threads = [threading.Thread(target=load, args=[bodies[n % 2]]) for n in range(WORKERS)]
    for thread in threads:
        thread.start()
    time.sleep(before_s)
    asked = time.monotonic()
    os.kill(pid, signal.SIGTERM)
    while running(pid) and time.monotonic() - asked < allowed_s:
        time.sleep(0.02)
    took = time.monotonic() - asked
    ending.set()
    for thread in threads:
        thread.join()
    print(f"SIGTERM under load: gone after {took:.2f} s; {len(whole)} whole answers, {len(cut)} cut short, {len(refused)} refused after")
    return not running(pid) and not cut and len(whole) > 0


def slow_request():
    """A request that takes seconds: a day, every cycle resolved."""
    request = json.loads(pathlib.Path("openapi/examples/own-device.json").read_text())
    request["options"] |= {"method": "resolved", "bands": False}
    return json.dumps(request).encode()


def running(pid):
    """False once the process is gone or only waits to be collected by its parent."""
    try:
        return pathlib.Path(f"/proc/{pid}/stat").read_text().rpartition(")")[2].split()[0] != "Z"
    except FileNotFoundError:
        return False


if __name__ == "__main__":
    check = {"memory": memory, "drain": drain}[sys.argv[1]]
    sys.exit(0 if check(sys.argv[2].removeprefix("http://"), int(sys.argv[3])) else 1)
