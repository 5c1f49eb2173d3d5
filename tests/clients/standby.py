"""Kernels that are taken over by a process that stands by: `standby.py CASE HADE`."""

import glob
import os
import pathlib
import signal
import subprocess
import sys
import tempfile
import time

from kernels import PATIENCE, Kernel

LOOP = "let mut n = 0u64; loop { n = std::hint::black_box(n.wrapping_add(1)); }"
CACHE = pathlib.Path(os.environ.get("HADE_CACHE") or pathlib.Path.home() / ".cache/hade")


def session_folders():
    return set(glob.glob(os.path.join(tempfile.gettempdir(), "hade-session-*")))


def sockets():
    return set(CACHE.glob("standby/*.socket"))


def until(what, condition, seconds=PATIENCE):
    deadline = time.monotonic() + seconds
    while not condition():
        assert time.monotonic() < deadline, f"after {seconds} s not: {what}"
        time.sleep(0.05)


def stand_by(hade, *options):
    """One that has just been started, once it is ready."""
    before = sockets()
    process = subprocess.Popen(
        [hade, "kernel", "standby", *options], start_new_session=True, cwd="/", stdin=subprocess.DEVNULL
    )
    until("a socket", lambda: sockets() - before or process.poll() is not None)
    assert process.poll() is None, "it did not stay"
    (socket,) = sockets() - before
    assert socket.parent.stat().st_mode & 0o777 == 0o700
    return process, socket


def a_kernel_is_taken_over(hade):
    process, socket = stand_by(hade)
    folder = tempfile.mkdtemp()
    os.chdir(folder)
    k = Kernel({"GREETING": "good day"})
    begun = time.monotonic()
    assert k.text('println!("{}", std::env::var("GREETING")?);') == "good day\n"
    print(f"ready after {k.ready_after:.2f} s, the first cell after {time.monotonic() - begun:.2f} s more")
    assert not socket.exists(), "it can be taken twice"
    assert process.poll() is None, "the kernel runs elsewhere"
    where = 'println!("{}", std::env::current_dir()?.display());'
    assert k.text(where).strip() == os.path.realpath(folder)

    message = k.send(LOOP)
    time.sleep(1)
    k.manager.interrupt_kernel()
    assert k.reply(message)["ename"] == "Interrupted"
    # The process that runs the cells is another one now.
    assert k.text(where).strip() == os.path.realpath(folder)
    k.run("std::process::exit(3)")
    assert k.text(where + 'println!("{}", std::env::var("GREETING")?);').split("\n")[1] == "good day"
    k.text(":clear")
    assert k.text(where).strip() == os.path.realpath(folder)

    k.client.stop_channels()
    k.manager.shutdown_kernel()
    assert process.wait(PATIENCE) == 0
    assert not session_folders(), session_folders()


def a_kernel_ends_with_its_own_process(hade):
    process, _ = stand_by(hade)
    k = Kernel()
    assert k.text('println!("on");') == "on\n" and process.poll() is None
    k.client.stop_channels()
    os.kill(k.manager.provisioner.pid, signal.SIGKILL)
    assert process.wait(PATIENCE) == 0
    k.manager.shutdown_kernel(now=True)
    assert not session_folders(), session_folders()


def a_restart_finds_its_ports(hade):
    process, _ = stand_by(hade)
    k = Kernel()
    k.text("let kept = 1;")
    for now in (True, False):
        k.manager.restart_kernel(now=now)
        k.client.wait_for_ready(timeout=PATIENCE)
        assert k.run("kept")[0]["status"] == "error"
        k.text("let kept = 1;")
    assert process.wait(PATIENCE) == 0
    k.client.stop_channels()
    k.manager.shutdown_kernel()


def without_one_the_kernel_serves_itself(hade):
    k = Kernel()
    assert k.text('println!("on");') == "on\n"
    k.client.stop_channels()
    k.manager.shutdown_kernel()


def nobody_comes(hade):
    process, socket = stand_by(hade, "--idle", "1")
    assert process.wait(PATIENCE) == 0 and not socket.exists()
    assert not session_folders(), session_folders()


def one_is_enough(hade):
    process, _ = stand_by(hade)
    second = subprocess.run([hade, "kernel", "standby"], timeout=PATIENCE, cwd="/")
    assert second.returncode == 0 and process.poll() is None
    # Sent away before the libraries change.
    subprocess.run([hade, "kernel", "install", "--prefix", tempfile.mkdtemp()], check=True, timeout=PATIENCE)
    assert process.wait(PATIENCE) == 0
    assert not session_folders(), session_folders()


def main(case, hade):
    try:
        globals()[case](hade)
    finally:
        # Each kernel had another one made ready, which would wait for half an hour.
        subprocess.run([hade, "kernel", "install", "--prefix", tempfile.mkdtemp()], check=True, timeout=PATIENCE)


if __name__ == "__main__":
    main(*sys.argv[1:])
