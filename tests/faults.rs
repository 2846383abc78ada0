//! What goes wrong around the program: killed, interrupted, no room on the disk, a folder that cannot be written, a reader that went
//! away. Earlier output stays whole, nothing half-written bears a final name, the exit status says what happened.
//!
//! Root may write where permissions forbid it, so a read-only folder is played by one that the kernel refuses to everybody; where
//! the tests do not run as root, permissions are tried too. A full disk is a small file system of its own where one may be mounted,
//! the kernel's limit on a file's size everywhere, and the device that is always full.
#![cfg(unix)]
#![cfg(test)]

use std::collections::BTreeMap;
use std::fs;
use std::io::Read;
use std::os::unix::process::ExitStatusExt;
use std::path::{Path, PathBuf};
use std::process::{Child, Command, Output, Stdio};
use std::time::{Duration, Instant};

const SIGINT: i32 = 2;
const SIGKILL: i32 = 9;

fn program() -> Command {
    let mut command = Command::new(env!("CARGO_BIN_EXE_winterledger"));
    command.current_dir(env!("CARGO_MANIFEST_DIR"));
    command
}

/// A brief with another heat loss, so that every file of its results differs.
fn brief(folder: &Path, heat_loss: &str) -> PathBuf {
    let root = env!("CARGO_MANIFEST_DIR");
    let text = fs::read_to_string(format!("{root}/briefs/terrace.toml")).unwrap();
    let text = text
        .replace("212 W/K", heat_loss)
        .replace("\"../", &format!("\"{root}/"))
        .replace("\"machines/", &format!("\"{root}/briefs/machines/"));
    let path = folder.join("brief.toml");
    fs::write(&path, text).unwrap();
    path
}

fn estimate(brief: &Path, out: &Path) -> Command {
    let mut command = program();
    command.arg("estimate").arg(brief).arg("--force");
    command.arg("--out").arg(out);
    command.stdout(Stdio::null()).stderr(Stdio::null());
    command
}

/// Files under their final names; what is still being written begins with a dot.
fn finished(folder: &Path) -> BTreeMap<String, Vec<u8>> {
    let entries = fs::read_dir(folder).into_iter().flatten();
    entries
        .map(|entry| entry.unwrap().path())
        .map(|path| (path.file_name().unwrap().to_str().unwrap().to_owned(), path))
        .filter(|(name, _)| !name.starts_with('.'))
        .map(|(name, path)| (name, fs::read(path).unwrap()))
        .collect()
}

fn is_writing(folder: &Path) -> bool {
    let entries = fs::read_dir(folder).into_iter().flatten();
    entries
        .filter(|entry| {
            let name = entry.as_ref().unwrap().file_name();
            name.to_string_lossy().starts_with('.')
        })
        .count()
        > 1
}

fn signal(child: &Child, number: i32) {
    let told = Command::new("kill")
        .arg(format!("-{number}"))
        .arg(child.id().to_string())
        .status();
    assert!(told.unwrap().success());
}

/// Killed and interrupted at many moments over earlier results: each file is the earlier one or the new one, whole.
#[test]
fn a_kill_leaves_every_file_whole() {
    let (old_home, new_home) = (tempfile::tempdir().unwrap(), tempfile::tempdir().unwrap());
    let old_brief = brief(old_home.path(), "212 W/K");
    let new_brief = brief(new_home.path(), "190 W/K");
    let (old_out, new_out) = (old_home.path().join("out"), new_home.path().join("out"));
    assert!(estimate(&old_brief, &old_out).status().unwrap().success());
    let began = Instant::now();
    assert!(estimate(&new_brief, &new_out).status().unwrap().success());
    let takes = began.elapsed();
    let (old, new) = (finished(&old_out), finished(&new_out));
    assert!(old.len() > 20 && old.len() == new.len());
    assert!(old["result.json"] != new["result.json"]);

    let out = old_home.path().join("played");
    let (mut stopped, mut stopped_writing) = (0, 0);
    for moment in 0..12u64 {
        let _ = fs::remove_dir_all(&out);
        fs::create_dir(&out).unwrap();
        for (name, content) in &old {
            fs::write(out.join(name), content).unwrap();
        }
        let mut child = estimate(&new_brief, &out).spawn().unwrap();
        if moment % 2 == 0 {
            // Anywhere in the run.
            std::thread::sleep(takes.mul_f64(moment as f64 / 12.0));
        } else {
            // While the files are written.
            while child.try_wait().unwrap().is_none() && !is_writing(&out) {
                std::thread::sleep(Duration::from_millis(1));
            }
            std::thread::sleep(Duration::from_millis(moment / 2));
            stopped_writing += i32::from(child.try_wait().unwrap().is_none());
        }
        let number = if moment % 4 < 2 { SIGKILL } else { SIGINT };
        if child.try_wait().unwrap().is_none() {
            signal(&child, number);
        }
        let status = child.wait().unwrap();
        assert!(
            status.success() || status.signal() == Some(number),
            "{status:?}"
        );
        stopped += i32::from(!status.success());
        let held = finished(&out);
        assert_eq!(held.len(), old.len(), "moment {moment}");
        for (name, content) in &held {
            assert!(
                content == &old[name] || content == &new[name],
                "moment {moment}: {name} is neither the earlier nor the new one"
            );
        }
    }
    println!("{stopped} of 12 runs stopped, {stopped_writing} of them at work on the files");
    // How many are caught depends on the machine; none would mean that nothing was tried.
    assert!(stopped >= 4 && stopped_writing >= 2);
}

/// Earlier results and what a run that could not write left of them.
fn untouched(out: &Path, earlier: &BTreeMap<String, Vec<u8>>) {
    assert!(finished(out) == *earlier, "earlier results were touched");
    assert!(!is_writing(out), "something half-written was left");
}

fn refused(output: &Output) {
    assert_eq!(output.status.code(), Some(3), "{output:?}");
    let told = String::from_utf8_lossy(&output.stderr);
    assert!(told.contains("cannot write"), "{told}");
    assert!(!told.contains("panicked"), "{told}");
}

/// A limit on the size of a file stops the writing in the middle of one.
#[test]
fn no_room_leaves_earlier_results_alone() {
    let folder = tempfile::tempdir().unwrap();
    let brief = brief(folder.path(), "212 W/K");
    let out = folder.path().join("out");
    fs::create_dir(&out).unwrap();
    fs::write(out.join("result.json"), "{}").unwrap();
    let earlier = finished(&out);
    let output = Command::new("sh")
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .arg("-c")
        // 200 blocks of 512 bytes: less than a ledger. Without its signal the limit is an error of writing.
        .arg("trap '' XFSZ; ulimit -f 200; exec \"$0\" estimate \"$1\" --force --out \"$2\"")
        .arg(env!("CARGO_BIN_EXE_winterledger"))
        .arg(&brief)
        .arg(&out)
        .output()
        .unwrap();
    refused(&output);
    untouched(&out, &earlier);
}

/// A file system of 300 kB, in a name space of its own so that nothing of the machine changes.
#[test]
fn a_full_disk_leaves_earlier_results_alone() {
    let folder = tempfile::tempdir().unwrap();
    let brief = brief(folder.path(), "212 W/K");
    let out = folder.path().join("out");
    fs::create_dir(&out).unwrap();
    let script = "mount -t tmpfs -o size=300k none \"$2\" || exit 99; printf '{}' > \"$2/result.json\"; \
        \"$0\" estimate \"$1\" --force --out \"$2\"; status=$?; \
        test \"$(cat \"$2/result.json\")\" = '{}' && test \"$(ls -A \"$2\")\" = result.json || exit 98; exit $status";
    let output = Command::new("unshare")
        .args(["--user", "--map-root-user", "--mount", "sh", "-c", script])
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .arg(env!("CARGO_BIN_EXE_winterledger"))
        .arg(&brief)
        .arg(&out)
        .output();
    match output {
        Ok(output) if !matches!(output.status.code(), Some(99 | 1)) => refused(&output),
        _ => eprintln!(
            "no file system may be mounted here: the limit on a file's size stands for it"
        ),
    }
}

#[test]
fn a_device_that_is_full_is_told() {
    let full = Path::new("/dev/full");
    if !full.exists() {
        eprintln!("this system has no device that is always full");
        return;
    }
    for arguments in [
        &["estimate"][..],
        &[
            "cycle",
            "--refrigerant",
            "R290",
            "--evaporating",
            "-5",
            "--condensing",
            "45",
        ],
    ] {
        let output = program()
            .args(arguments)
            .stdout(fs::OpenOptions::new().write(true).open(full).unwrap())
            .output()
            .unwrap();
        refused(&output);
    }
}

/// Folders that cannot be written: below a file, in a file system of the kernel, and one without permission.
#[test]
fn a_folder_that_cannot_be_written_is_told_before_the_work() {
    let folder = tempfile::tempdir().unwrap();
    let file = folder.path().join("file");
    fs::write(&file, "kept").unwrap();
    let mut places = vec![file.join("out")];
    if Path::new("/proc/self").exists() {
        places.push("/proc/results".into());
    }
    let forbidden = folder.path().join("forbidden");
    fs::create_dir(&forbidden).unwrap();
    let mut permissions = fs::metadata(&forbidden).unwrap().permissions();
    permissions.set_readonly(true);
    fs::set_permissions(&forbidden, permissions).unwrap();
    if fs::write(forbidden.join("try"), "").is_err() {
        places.push(forbidden);
    } else {
        eprintln!("permissions do not hold root back: not tried");
    }
    for place in places {
        let began = Instant::now();
        let output = program()
            .arg("estimate")
            .arg("--out")
            .arg(&place)
            .output()
            .unwrap();
        refused(&output);
        println!("{}: {:?}", place.display(), began.elapsed());
    }
    assert_eq!(fs::read_to_string(&file).unwrap(), "kept");
}

/// `estimate … | head`: whoever read has enough, which is no failure; also where messages have no reader.
#[test]
fn a_reader_that_goes_away_is_no_failure() {
    let cycle = [
        "cycle",
        "--refrigerant",
        "R290",
        "--evaporating",
        "-5",
        "--condensing",
        "45",
    ];
    let every: [&[&str]; 6] = [
        &["estimate", "--format", "json"],
        &[
            "weather",
            "weather_samples/morvane_sound.csv",
            "--format",
            "json",
        ],
        &["schema", "brief"],
        &cycle,
        &["tariff", "tariffs/flat_electricity.toml"],
        &["completions", "bash"],
    ];
    for arguments in every {
        for read in [0, 10] {
            let mut child = program()
                .args(arguments)
                .stdout(Stdio::piped())
                .stderr(Stdio::piped())
                .spawn()
                .unwrap();
            let mut taken = vec![0; read];
            child.stdout.take().unwrap().read_exact(&mut taken).unwrap();
            let output = child.wait_with_output().unwrap();
            assert!(output.status.success(), "{arguments:?}: {output:?}");
            assert!(
                !String::from_utf8_lossy(&output.stderr).contains("panicked"),
                "{arguments:?}"
            );
        }
    }
    for (arguments, code) in [(&["estimate"][..], 0), (&["estimate", "no/such.toml"], 1)] {
        let mut child = program()
            .args(arguments)
            .stdout(Stdio::null())
            .stderr(Stdio::piped())
            .spawn()
            .unwrap();
        drop(child.stderr.take());
        assert_eq!(
            child.wait().unwrap().code(),
            Some(code),
            "{arguments:?}, no reader of messages"
        );
    }
}
