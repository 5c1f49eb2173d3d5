"""Kernels from start to end: `life.py CASE`. Each case fails with what it saw."""

import fcntl
import glob
import json
import os
import signal
import stat
import subprocess
import sys
import tempfile
import time

import zmq
from jupyter_client.session import Session

from kernels import PATIENCE, Kernel, kernel

SHOW = 'fn show(mime: &str, text: &str) { println!("EVCXR_BEGIN_CONTENT {mime}\\n{text}\\nEVCXR_END_CONTENT"); }\n'
LOOP = "let mut n = 0u64; loop { n = std::hint::black_box(n.wrapping_add(1)); }"


def session_folders():
    return glob.glob(os.path.join(tempfile.gettempdir(), "hade-session-*"))


def gone(process_id):
    """Whether a process has ended, though perhaps nobody has asked how."""
    try:
        os.kill(process_id, 0)
        with open(f"/proc/{process_id}/stat") as file:
            return file.read().rsplit(")", 1)[1].split()[0] == "Z"
    except (ProcessLookupError, FileNotFoundError):
        return True


def until(what, condition, seconds=10):
    deadline = time.monotonic() + seconds
    while not condition():
        assert time.monotonic() < deadline, f"after {seconds} s not: {what}"
        time.sleep(0.05)


def outputs_come_while_the_cell_runs():
    with kernel() as k:
        reply, shown = k.run(
            SHOW + 'println!("one"); show("text/html", "<b>1</b>"); show("text/plain", "1"); eprintln!("err");'
            "std::thread::sleep(std::time::Duration::from_secs(1));"
            'show("image/svg+xml", "<svg/>"); println!("two"); show("text/plain", "plain");'
            'println!("three"); eprintln!("err"); "last".to_string()'
        )
        assert reply["status"] == "ok" and reply["execution_count"] == 1, reply
        kinds = [(kind, content.get("name") or sorted(content["data"])) for _, kind, content in shown]
        assert kinds == [
            ("stream", "stdout"),
            ("display_data", ["text/html", "text/plain"]),
            ("stream", "stderr"),
            ("display_data", ["image/svg+xml"]),
            ("stream", "stdout"),
            ("display_data", ["text/plain"]),
            ("stream", "stdout"),
            ("stream", "stderr"),
            ("execute_result", ["text/plain"]),
        ], kinds
        waited = shown[-1][0] - shown[2][0]
        assert waited > 0.8, f"the first outputs came only {waited:.2f} s before the last"


def much_text_comes_in_few_messages():
    with kernel() as k:
        _, shown = k.run('for n in 0..100_000 { println!("{n}"); }')
        text = "".join(content["text"] for _, kind, content in shown if kind == "stream")
        assert text.splitlines()[:100_000] == [str(n) for n in range(100_000)]
        assert len(shown) < 500, f"{len(shown)} messages"


def a_display_is_replaced_by_its_name():
    named = 'fn bar(n: i32) { println!("EVCXR_BEGIN_CONTENT application/vnd.hade.display-id\\nbar\\nEVCXR_END_CONTENT\\nEVCXR_BEGIN_CONTENT text/plain\\n{n}\\nEVCXR_END_CONTENT"); }\n'
    with kernel() as k:
        _, shown = k.run(named + 'bar(1); println!("between"); bar(2);')
        kinds = [kind for _, kind, _ in shown]
        assert kinds == ["display_data", "stream", "update_display_data"], kinds
        last = shown[-1][2]
        assert last["transient"] == {"display_id": "bar"} and last["data"] == {"text/plain": "2"}, last


def long_work_shows_how_far_it_is():
    code = (
        'let work = hade::progress::Progress::new("places", 60);\n'
        "for _ in 0..60 { std::thread::sleep(std::time::Duration::from_millis(50)); work.advance(1); }\ndrop(work);\n"
    )
    with kernel() as k:
        k.run("let a = 1;")
        reply, shown = k.run(code + '"end".to_string()')
        assert reply["status"] == "ok", reply
        bars = [(kind, content["data"]["text/plain"]) for _, kind, content in shown if "display" in kind]
        assert [kind for kind, _ in bars[:2]] == ["display_data", "update_display_data"], bars
        assert 3 <= len(bars) <= 8, bars
        assert bars[0][1].startswith("places ▰") and "left" in bars[0][1], bars
        assert bars[-1][1].startswith("places: done after 3."), bars
        assert shown[-1][1] == "execute_result" and shown[-1][2]["data"]["text/plain"] == '"end"', shown[-1]
        # One that is stopped says so.
        message = k.send(code.replace("from_millis(50)", "from_millis(500)"))
        time.sleep(4)
        k.manager.interrupt_kernel()
        last = [content for _, kind, content in k.outputs(message) if kind == "update_display_data"][-1]
        assert last["data"]["text/plain"].startswith("places: stopped after"), last
        assert k.text('println!("{a}");') == "1\n"


def every_failure_has_its_name():
    with kernel() as k:
        for code, name, word in [
            ('Err("too deep".to_string())?;', "Error", "too deep"),
            ('eprintln!("note"); panic!("no rock");', "Panic", "no rock"),
            ("let a: i32 = 1.5;", "E0308", ""),
            ("std::process::exit(3);", "ProcessDied", "exit status 3"),
            ("let mut s = String::new(); std::io::stdin().read_line(&mut s)?;", "NoInput", "standard input"),
        ]:
            reply, shown = k.run(code)
            assert reply["status"] == "error" and reply["ename"] == name and word in reply["evalue"], reply
            assert reply["traceback"], reply
            _, kind, content = shown[-1]
            assert kind == "error" and content["ename"] == name, shown
        assert k.text('println!("on");') == "on\n"


def cells_behind_a_failure_are_aborted():
    with kernel() as k:
        first = k.send('std::thread::sleep(std::time::Duration::from_secs(1)); panic!("stop");')
        second, third = k.send('println!("second");'), k.send("1 + 1")
        assert k.reply(first)["status"] == "error"
        # Without a number: a client would show it.
        assert [k.reply(second), k.reply(third)] == 2 * [{"status": "aborted"}]
        assert k.text('println!("later");') == "later\n"
        first = k.send('std::thread::sleep(std::time::Duration::from_secs(1)); panic!("go on");', stop_on_error=False)
        second = k.send('println!("second");')
        assert [k.reply(first)["status"], k.reply(second)["status"]] == ["error", "ok"]


def cells_are_counted_unless_they_are_silent():
    with kernel() as k:
        assert k.run("let a = 1;")[0]["execution_count"] == 1
        reply, shown = k.run('println!("unheard"); 5', silent=True)
        assert reply["execution_count"] == 1 and shown == [], (reply, shown)
        assert k.run("a", store_history=False)[0]["execution_count"] == 1
        assert k.run("a", user_expressions={"x": "a"})[0]["execution_count"] == 2


def questions_are_answered_while_a_cell_runs():
    with kernel() as k:
        assert k.ready_after < 3, f"ready after {k.ready_after:.2f} s"
        k.send("std::thread::sleep(std::time::Duration::from_secs(3));")
        time.sleep(0.5)
        asked = time.monotonic()
        for ask in (k.client.kernel_info, lambda: k.client.is_complete("1"), k.client.history, k.client.comm_info):
            k.reply(ask())
        took = time.monotonic() - asked
        assert took < 1, f"{took:.2f} s for four answers"


def an_endless_loop_is_interrupted():
    with kernel() as k:
        k.run("let kept = 1; fn doubled(x: i32) -> i32 { 2 * x }")
        endless = k.send(LOOP)
        waiting = k.send('println!("never");')
        time.sleep(2)
        asked = time.monotonic()
        k.manager.interrupt_kernel()
        reply = k.reply(endless)
        took = time.monotonic() - asked
        assert reply["status"] == "error" and reply["ename"] == "Interrupted", reply
        assert took < 4, f"interrupted after {took:.2f} s"
        assert k.reply(waiting)["status"] == "aborted"
        assert k.text('println!("{}", doubled(21));') == "42\n"
        # The signal does the same.
        endless = k.send(LOOP)
        time.sleep(2)
        os.kill(k.manager.provisioner.pid, signal.SIGINT)
        assert k.reply(endless)["ename"] == "Interrupted"
        assert k.text('println!("on");') == "on\n"


def two_kernels_do_not_meet():
    with kernel() as one, kernel() as two:
        one.run("let a = 1;")
        two.run("let a = 2;")
        assert one.text('println!("{a}");') == "1\n"
        assert two.text('println!("{a}");') == "2\n"
        assert len(session_folders()) >= 2


def nothing_stays_behind():
    before = set(session_folders())
    with kernel() as k:
        assert k.text('println!("{}", std::process::id());')
        assert set(session_folders()) - before
        process = k.manager.provisioner.pid
    assert gone(process)
    assert set(session_folders()) == before
    # In the middle of a cell that never ends, and of a start.
    for code in [LOOP, None]:
        k = Kernel()
        if code:
            k.run("let a = 1;")
            k.send(code)
            time.sleep(1.5)
        k.client.stop_channels()
        k.manager.shutdown_kernel()
        until("the folder is gone", lambda: set(session_folders()) == before)


def a_cell_that_waits_for_the_libraries_is_told():
    with tempfile.TemporaryDirectory() as cache, open(os.path.join(cache, "lock"), "w") as lock:
        fcntl.flock(lock, fcntl.LOCK_EX)
        with kernel({"HADE_CACHE": cache}) as k:
            process = k.manager.provisioner.pid
            time.sleep(1)
            message_id = k.send("1")
            time.sleep(1)
            k.send("2")
            said = ""
            while "waiting for it" not in said:
                message = k.client.get_iopub_msg(timeout=PATIENCE)
                if message["msg_type"] == "stream" and message["parent_header"]["msg_id"] == message_id:
                    said += message["content"]["text"]
        assert gone(process)


def without_a_compiler_a_cell_says_what_to_do():
    with kernel({"PATH": "/nowhere"}) as k:
        for _ in range(2):
            reply, _ = k.run("1", stop_on_error=False)
            assert reply["ename"] == "StartError" and "https://rustup.rs" in reply["evalue"], reply


def a_restart_begins_anew():
    with kernel() as k:
        k.run("let a = 1;")
        k.manager.restart_kernel()
        k.client.wait_for_ready(timeout=PATIENCE)
        reply, _ = k.run("a")
        assert reply["ename"] == "E0425", reply
        assert reply["execution_count"] == 1


def a_kernel_ends_with_its_client():
    script = "import sys, time; from jupyter_client.manager import KernelManager\nm = KernelManager(kernel_name='hade'); m.start_kernel(); print(m.provisioner.pid, flush=True); time.sleep(60)"
    client = subprocess.Popen([sys.executable, "-c", script], stdout=subprocess.PIPE, text=True)
    process = int(client.stdout.readline())
    time.sleep(3)
    client.kill()
    client.wait()
    until("the kernel has ended", lambda: gone(process))


def strangers_are_not_heard():
    with kernel() as k:
        mode = stat.S_IMODE(os.stat(k.manager.connection_file).st_mode)
        assert mode == 0o600, oct(mode)
        with open(k.manager.connection_file) as file:
            info = json.load(file)
        context = zmq.Context()
        socket = context.socket(zmq.DEALER)
        socket.connect(f"tcp://127.0.0.1:{info['shell_port']}")
        for key, heard in [(b"wrong", False), (info["key"].encode(), True)]:
            session = Session(key=key, signature_scheme="hmac-sha256")
            session.send(socket, "kernel_info_request", content={})
            assert bool(socket.poll(3000)) == heard, f"key {key} heard: {not heard}"
        socket.send_multipart([b"no message"])
        assert k.text('println!("on");') == "on\n"
        context.destroy(linger=0)
        info["ip"] = "0.0.0.0"
        path = os.path.join(tempfile.gettempdir(), "elsewhere.json")
        with open(path, "w") as file:
            json.dump(info, file)
        command = k.manager.kernel_spec.argv[:-1] + [path]
        said = subprocess.run(command, capture_output=True, text=True, timeout=PATIENCE)
        assert said.returncode == 1 and "127.0.0.1" in said.stderr, said


def writing_is_helped():
    with kernel() as k:
        k.run("let pressure = 68.5.mpa();")
        code = "let σ = pressure.in_m; // ende"
        reply = k.reply(k.client.complete(code, cursor_pos=code.index(";")))
        start, end = reply["cursor_start"], reply["cursor_end"]
        assert code[start:end] == "in_m" and "in_mpa()" in reply["matches"], reply
        types = reply["metadata"]["_jupyter_types_experimental"]
        assert {"function"} == {t["type"] for t in types if t["text"] == "in_mpa()"}, types
        for code, word in [("Stress::from_horizontals", "horizontal"), ("pressure.in_mpa()", "f64"), ("pressure", "Pressure")]:
            reply = k.reply(k.client.inspect(code, cursor_pos=len(code.split("(")[0])))
            assert reply["found"] and word in reply["data"]["text/plain"], (code, reply)
            assert "text/html" in reply["data"]
        assert not k.reply(k.client.inspect("nothing_of_that_name"))["found"]


def a_comm_is_closed_at_once():
    with kernel() as k:
        message = k.client.session.msg("comm_open", {"comm_id": "c1", "target_name": "x", "data": {}})
        k.client.shell_channel.send(message)
        shown = [(kind, content) for _, kind, content in k.outputs(message["header"]["msg_id"]) if kind != "status"]
        assert shown == [("comm_close", {"comm_id": "c1", "data": {}})], shown
        assert k.reply(k.client.comm_info())["comms"] == {}


if __name__ == "__main__":
    globals()[sys.argv[1]]()
