//! The compilers that work for a session.

use std::path::Path;

/// Ends every compiler that this program started in a session's folder. They lose nothing that Cargo does not
/// make anew. Whether there was one.
pub(crate) fn kill_compilers(work: &Path) -> bool {
    let processes = processes();
    let own = std::process::id();
    let heads: Vec<u32> = processes.iter().filter(|p| p.parent == own && is_compiler(p, work)).map(|p| p.id).collect();
    let mut ends = heads.clone();
    let mut seen = 0;
    while let Some(&parent) = ends.get(seen) {
        ends.extend(processes.iter().filter(|p| p.parent == parent).map(|p| p.id));
        seen += 1;
    }
    // Cargo first, so that it starts nothing new.
    for id in ends {
        // SAFETY: a signal to a child of this program, or to a child's child, seen a moment ago.
        unsafe { libc::kill(id as libc::pid_t, libc::SIGKILL) };
    }
    !heads.is_empty()
}

struct Process {
    id: u32,
    parent: u32,
    #[cfg(not(target_os = "linux"))]
    program: String,
}

#[cfg(target_os = "linux")]
fn processes() -> Vec<Process> {
    let folders = std::fs::read_dir("/proc").into_iter().flatten().flatten();
    folders
        .filter_map(|entry| {
            let id = entry.file_name().to_str()?.parse().ok()?;
            let stat = std::fs::read_to_string(entry.path().join("stat")).ok()?;
            // The name in brackets may hold anything; after it come the state and the parent.
            let parent = stat.rsplit(')').next()?.split_whitespace().nth(1)?.parse().ok()?;
            Some(Process { id, parent })
        })
        .collect()
}

/// The engine starts Cargo in the folder it compiles in; the cells run elsewhere.
#[cfg(target_os = "linux")]
fn is_compiler(process: &Process, work: &Path) -> bool {
    std::fs::read_link(format!("/proc/{}/cwd", process.id)).is_ok_and(|cwd| cwd == work)
}

#[cfg(not(target_os = "linux"))]
fn processes() -> Vec<Process> {
    let listed = std::process::Command::new("ps").args(["-A", "-o", "pid=,ppid=,comm="]).output();
    let text = listed.map(|said| String::from_utf8_lossy(&said.stdout).into_owned()).unwrap_or_default();
    text.lines()
        .filter_map(|line| {
            let mut words = line.split_whitespace();
            Some(Process {
                id: words.next()?.parse().ok()?,
                parent: words.next()?.parse().ok()?,
                program: words.next()?.to_owned(),
            })
        })
        .collect()
}

#[cfg(not(target_os = "linux"))]
fn is_compiler(process: &Process, _: &Path) -> bool {
    process.program.rsplit('/').next().is_some_and(|name| name == "cargo")
}

#[cfg(all(test, target_os = "linux"))]
mod tests {
    use std::os::unix::process::ExitStatusExt as _;
    use std::process::Command;

    use super::*;

    #[test]
    fn only_what_works_in_the_folder_is_ended() -> std::io::Result<()> {
        let dir = tempfile::tempdir()?;
        let work = dir.path().canonicalize()?;
        let mut inside = Command::new("sh").args(["-c", "sleep 60 & wait"]).current_dir(&work).spawn()?;
        let mut outside = Command::new("sleep").arg("60").spawn()?;
        // The shell has started its own child when it has one.
        while !processes().iter().any(|p| p.parent == inside.id()) {
            std::thread::sleep(std::time::Duration::from_millis(5));
        }
        let grandchildren: Vec<u32> = processes().iter().filter(|p| p.parent == inside.id()).map(|p| p.id).collect();
        assert!(kill_compilers(&work));
        assert_eq!(inside.wait()?.signal(), Some(libc::SIGKILL));
        assert!(outside.try_wait()?.is_none());
        outside.kill()?;
        outside.wait()?;
        for id in grandchildren {
            let state = || std::fs::read_to_string(format!("/proc/{id}/stat")).unwrap_or_default();
            let gone = || state().is_empty() || state().contains(") Z ") || state().contains(") X ");
            let limit = std::time::Instant::now() + std::time::Duration::from_secs(5);
            while !gone() && std::time::Instant::now() < limit {
                std::thread::sleep(std::time::Duration::from_millis(5));
            }
            assert!(gone(), "{}", state());
        }
        assert!(!kill_compilers(&work));
        Ok(())
    }
}
