//! Several sessions, a cache that is away, processes that are killed.
//!
//! Some of it needs a process of its own: the test program is started again with a role.

use std::io::{BufRead as _, BufReader, Read as _};
use std::path::{Path, PathBuf};
use std::process::{Child, Command, Stdio};
use std::time::{Duration, Instant};
use std::{env, fs, thread};

use hade_kernel::{Progress, Session, SessionOptions, Step, Stream, cache_folder, prepare};

use crate::{Bench, Test};

pub(crate) const TESTS: &[(&str, Test)] = &[
    ("two_sessions_do_not_meet", two_sessions_do_not_meet),
    ("two_that_prepare_at_once_wait_for_each_other", two_that_prepare_at_once_wait_for_each_other),
    ("a_cache_that_cannot_be_written_says_what_to_do", a_cache_that_cannot_be_written_says_what_to_do),
    ("a_full_disk_says_what_to_do", a_full_disk_says_what_to_do),
    ("a_cache_removed_under_a_session_is_named", a_cache_removed_under_a_session_is_named),
    ("a_killed_session_leaves_no_process_and_no_folder", a_killed_session_leaves_no_process_and_no_folder),
];

/// Names the role of a process of the test's own.
pub(crate) const ROLE_VAR: &str = "HADE_TEST_ROLE";

/// What such a process does.
pub(crate) fn play(role: &str) {
    match role {
        "prepare" => match prepare(&mut Teller) {
            Ok(_) => println!("prepared"),
            Err(error) => println!("{error}"),
        },
        "prepare in little room" => {
            // SAFETY: a limit of this process only; a file that grows beyond it gives an error, not a signal.
            unsafe {
                libc::signal(libc::SIGXFSZ, libc::SIG_IGN);
                libc::setrlimit(libc::RLIMIT_FSIZE, &libc::rlimit { rlim_cur: 2000, rlim_max: 2000 });
            }
            play("prepare");
        }
        "hang" => {
            let prepared = prepare(&mut Teller).expect("the libraries can be built");
            let mut session = Session::start(&prepared, SessionOptions::default()).expect("a session starts");
            session.execute(
                "std::fs::write(\"id.part\", std::process::id().to_string())?;\nstd::fs::rename(\"id.part\", \"id\")?;\n\
                 std::thread::sleep(std::time::Duration::from_secs(100));",
            );
        }
        other => panic!("no role {other}"),
    }
}

struct Teller;

impl Progress for Teller {
    fn step(&mut self, step: Step<'_>) {
        if matches!(step, Step::Waiting) {
            println!("waiting");
        }
    }
}

fn process(role: &str, settings: &[(&str, &Path)]) -> Child {
    let mut command = Command::new(env::current_exe().expect("this program"));
    command.env(ROLE_VAR, role).stdout(Stdio::piped());
    for (name, value) in settings {
        command.env(name, value);
    }
    command.spawn().expect("this program starts again")
}

fn said(mut child: Child) -> String {
    let mut text = String::new();
    child.stdout.take().expect("its output").read_to_string(&mut text).expect("text");
    child.wait().expect("it ends");
    text
}

fn two_sessions_do_not_meet(bench: &mut Bench) {
    thread::scope(|scope| {
        for k in 1..=2 {
            let prepared = bench.prepared.clone();
            scope.spawn(move || {
                let mut session = Session::start(&prepared, SessionOptions::default()).expect("a session starts");
                assert_eq!(session.execute(&format!("let own = {k};")).error, None);
                for turn in 0..3 {
                    let outcome = session.execute(&format!("println!(\"{{}}\", own * 10 + {turn});"));
                    assert_eq!(outcome.text(Stream::Stdout), format!("{}\n", k * 10 + turn));
                }
            });
        }
    });
}

/// A folder of the cache, made again elsewhere without copying, as whole as it was or not.
fn link_folder(from: &Path, to: &Path) {
    fs::create_dir_all(to).expect("a folder");
    for entry in fs::read_dir(from).expect("the cache").flatten() {
        let (source, target) = (entry.path(), to.join(entry.file_name()));
        if source.is_dir() {
            link_folder(&source, &target);
        } else if entry.file_name() != "complete" {
            fs::hard_link(&source, &target).or_else(|_| fs::copy(&source, &target).map(|_| ())).expect("a file");
        }
    }
}

fn folders_of_the_cache() -> Vec<PathBuf> {
    let cache = cache_folder().expect("a cache");
    let ours = |path: &PathBuf| {
        let name = path.file_name().unwrap_or_default().to_string_lossy().into_owned();
        name.starts_with("session-") || name.starts_with("libraries-")
    };
    fs::read_dir(cache).expect("the cache").flatten().map(|entry| entry.path()).filter(ours).collect()
}

fn two_that_prepare_at_once_wait_for_each_other(_: &mut Bench) {
    let cache = cache_folder().expect("a cache");
    let other = tempfile::Builder::new().prefix("other-").tempdir_in(&cache).expect("a folder beside the cache");
    let copies: Vec<PathBuf> = folders_of_the_cache()
        .iter()
        .map(|folder| {
            let copy = other.path().join(folder.file_name().expect("a name"));
            link_folder(folder, &copy);
            copy
        })
        .collect();
    // Somebody is at work: nothing is whole yet.
    let lock = fs::File::create(other.path().join("lock")).expect("the lock");
    lock.lock().expect("the lock is free");
    let mut waiting: Vec<BufReader<std::process::ChildStdout>> = Vec::new();
    let mut children: Vec<Child> = (0..2).map(|_| process("prepare", &[("HADE_CACHE", other.path())])).collect();
    for child in &mut children {
        let mut output = BufReader::new(child.stdout.take().expect("its output"));
        let mut line = String::new();
        output.read_line(&mut line).expect("a line");
        assert_eq!(line, "waiting\n");
        waiting.push(output);
    }
    // The work is done; whoever waited must find it done, not do it again.
    for copy in &copies {
        fs::write(copy.join("complete"), copy.as_os_str().as_encoded_bytes()).expect("the stamp");
    }
    let started = Instant::now();
    drop(lock);
    for (mut output, mut child) in waiting.into_iter().zip(children) {
        let mut rest = String::new();
        output.read_to_string(&mut rest).expect("text");
        assert_eq!(rest, "prepared\n");
        assert!(child.wait().expect("it ends").success());
    }
    assert!(started.elapsed() < Duration::from_secs(5), "{:?}: something was built again", started.elapsed());
}

fn a_cache_that_cannot_be_written_says_what_to_do(_: &mut Bench) {
    let file = tempfile::NamedTempFile::new().expect("a file");
    // A folder below a file can be made by nobody, not even by root.
    let said = said(process("prepare", &[("HADE_CACHE", &file.path().join("cache"))]));
    assert!(said.starts_with("cannot make the folder ") && said.contains("or set HADE_CACHE to another"), "{said}");
}

fn a_full_disk_says_what_to_do(_: &mut Bench) {
    let cache = tempfile::tempdir().expect("a folder");
    let said = said(process("prepare in little room", &[("HADE_CACHE", cache.path())]));
    assert!(said.contains("the disk is full; free some 700 MB in "), "{said}");
    assert!(said.contains("or set HADE_CACHE to a folder on another disk"), "{said}");
}

fn a_cache_removed_under_a_session_is_named(bench: &mut Bench) {
    bench.session = None;
    bench.ok("let before = 1;");
    let lock = fs::File::options().write(true).open(cache_folder().expect("a cache").join("lock")).expect("the lock");
    lock.lock().expect("nobody builds now");
    let away: Vec<(PathBuf, PathBuf)> =
        folders_of_the_cache().into_iter().map(|folder| (folder.with_extension("away"), folder)).collect();
    for (away, folder) in &away {
        fs::rename(folder, away).expect("the folder can be moved");
    }
    let error = bench.run("before + 1").error;
    for (away, folder) in &away {
        fs::rename(away, folder).expect("the folder can be moved back");
    }
    let error = error.expect("an error");
    assert_eq!(error.name, "SessionError");
    assert!(error.sentence.contains("was removed while the session ran") && error.sentence.contains("restart"));
    assert_eq!(bench.value("before + 1"), "2");
}

fn a_killed_session_leaves_no_process_and_no_folder(_: &mut Bench) {
    let place = tempfile::tempdir().expect("a folder");
    let folders = || -> Vec<String> {
        let entries = fs::read_dir(place.path()).expect("the folder").flatten();
        let names = entries.map(|entry| entry.file_name().to_string_lossy().into_owned());
        names.filter(|name| name.starts_with("hade-session-")).collect()
    };
    let hang = || {
        let mut command = Command::new(env::current_exe().expect("this program"));
        command.env(ROLE_VAR, "hang").env("TMPDIR", place.path()).current_dir(place.path());
        command.spawn().expect("this program starts again")
    };
    let soon = |what: &str, is_so: &dyn Fn() -> bool| {
        let started = Instant::now();
        while !is_so() {
            assert!(started.elapsed() < Duration::from_secs(60), "{what}");
            thread::sleep(Duration::from_millis(20));
        }
        started.elapsed()
    };
    let mut child = hang();
    let file = place.path().join("id");
    soon("the cell never began", &|| file.exists());
    let id: i32 = fs::read_to_string(&file).expect("the number").parse().expect("a number");
    let left = folders();
    assert_eq!(left.len(), 1);
    child.kill().expect("it can be killed");
    child.wait().expect("it ends");
    // SAFETY: signal 0 asks only whether the process is there.
    let ended = soon("the cell runs on", &|| unsafe { libc::kill(id, 0) } != 0);
    assert!(ended < Duration::from_secs(5), "{ended:?}");
    assert_eq!(folders(), left);
    // The next session sweeps up before it makes its own folder.
    let mut next = hang();
    soon("no other session starts", &|| folders().iter().any(|name| !left.contains(name)));
    assert!(!folders().contains(&left[0]), "the folder of the killed session is still there");
    next.kill().expect("it can be killed");
    next.wait().expect("it ends");
}
