//! What makes a program easy to live with: a folder to begin with, schemas, completions, man pages, help whose examples run, no
//! colour where none is wanted.
#![cfg(test)]

use std::fs;
use std::path::Path;

use assert_cmd::Command;
use serde_json::Value;

fn root() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR"))
}

fn winterledger() -> Command {
    Command::cargo_bin("winterledger").unwrap()
}

fn run(arguments: &[&str]) -> String {
    let output = winterledger()
        .current_dir(root())
        .args(arguments)
        .output()
        .unwrap();
    assert!(
        output.status.success(),
        "{arguments:?}: {}",
        String::from_utf8_lossy(&output.stderr)
    );
    String::from_utf8(output.stdout).unwrap()
}

/// The folder runs as it is and gives what the built-in demonstration gives for the same systems.
#[test]
fn a_new_folder_runs_as_it_is() {
    let folder = tempfile::tempdir().unwrap();
    let home = folder.path().join("home");
    run(&["init", home.to_str().unwrap()]);
    let brief = home.join("brief.toml");
    let mine: Value = serde_json::from_str(&run(&[
        "estimate",
        brief.to_str().unwrap(),
        "--format",
        "json",
    ]))
    .unwrap();
    let demonstration: Value =
        serde_json::from_str(&run(&["estimate", "--format", "json"])).unwrap();
    for system in mine["systems"].as_array().unwrap() {
        let mut all = demonstration["systems"].as_array().unwrap().iter();
        let same = all.find(|other| other["label"] == system["label"]).unwrap();
        assert_eq!(same["cost"], system["cost"]);
    }
    let again = winterledger()
        .args(["init", home.to_str().unwrap()])
        .output()
        .unwrap();
    assert_eq!(
        again.status.code(),
        Some(3),
        "nothing is overwritten unasked"
    );
}

/// Every field of the commented brief is in the schema, and the schema is one.
#[test]
fn schemas_know_the_fields() {
    for (kind, file) in [
        ("brief", "src/cli/init.toml"),
        ("tariff", "tariffs/flat_electricity.toml"),
        ("sheet", "briefs/machines/air-r290-small.toml"),
    ] {
        let schema: Value = serde_json::from_str(&run(&["schema", kind])).unwrap();
        assert!(
            schema["$schema"]
                .as_str()
                .unwrap()
                .contains("json-schema.org")
        );
        let table: toml::Table = fs::read_to_string(root().join(file))
            .unwrap()
            .parse()
            .unwrap();
        for (name, value) in &table {
            let field = &schema["properties"][name];
            assert!(field.is_object(), "{kind} has no {name}");
            if let Some(inner) = value.as_table() {
                let text = field.to_string();
                for name in inner.keys() {
                    assert!(text.contains(&format!("\"{name}\"")), "{kind}: no {name}");
                }
            }
        }
    }
}

#[test]
fn completions_and_man_pages_name_every_command() {
    let help = run(&["--help"]);
    let commands: Vec<&str> = help
        .lines()
        .skip_while(|line| !line.starts_with("Commands:"))
        .skip(1)
        .take_while(|line| line.starts_with("  "))
        .filter_map(|line| line.strip_prefix("  ")?.split(' ').next())
        .filter(|name| !name.is_empty() && *name != "help")
        .collect();
    assert!(commands.len() > 8, "{commands:?}");
    for shell in ["bash", "zsh", "fish", "elvish", "powershell"] {
        let script = run(&["completions", shell]);
        for command in &commands {
            assert!(script.contains(command), "{shell} does not know {command}");
        }
    }
    let folder = tempfile::tempdir().unwrap();
    run(&["manual", folder.path().to_str().unwrap()]);
    for command in &commands {
        let page =
            fs::read_to_string(folder.path().join(format!("winterledger-{command}.1"))).unwrap();
        assert!(page.starts_with(".ie") || page.contains(".TH"), "{command}");
    }
}

/// The words of an example as a shell splits them: spaces part, quotation marks hold together.
fn words(line: &str) -> Vec<String> {
    let mut words = vec![String::new()];
    let mut quoted = false;
    for c in line.chars() {
        match c {
            '"' => quoted = !quoted,
            ' ' if !quoted => words.push(String::new()),
            _ => words.last_mut().unwrap().push(c),
        }
    }
    words.retain(|word| !word.is_empty());
    words
}

/// Every example of every help runs, in a copy of the files that the repository ships; each command has at least one.
#[test]
fn examples_of_the_help_run() {
    let folder = tempfile::tempdir().unwrap();
    for shipped in ["briefs", "tariffs", "weather_samples"] {
        copy(&root().join(shipped), &folder.path().join(shipped));
    }
    let help = run(&["--help"]);
    let commands = help
        .lines()
        .skip_while(|line| !line.starts_with("Commands:"))
        .skip(1)
        .take_while(|line| line.starts_with("  "))
        .filter_map(|line| line.strip_prefix("  ")?.split(' ').next())
        .filter(|name| !name.is_empty() && *name != "help");
    for command in commands {
        let help = run(&[command, "--help"]);
        let examples: Vec<&str> = help
            .lines()
            .filter_map(|line| line.trim().strip_prefix("winterledger "))
            .collect();
        assert!(!examples.is_empty(), "{command} teaches with no example");
        for example in examples {
            // What the example says stands after two spaces.
            let line = example.split("  ").next().unwrap();
            let output = winterledger()
                .current_dir(folder.path())
                .args(words(line))
                .output()
                .unwrap();
            assert!(
                output.status.success(),
                "winterledger {line}: {}",
                String::from_utf8_lossy(&output.stderr)
            );
        }
    }
}

fn copy(from: &Path, to: &Path) {
    fs::create_dir_all(to).unwrap();
    for entry in fs::read_dir(from).unwrap() {
        let entry = entry.unwrap();
        let target = to.join(entry.file_name());
        if entry.path().is_dir() {
            copy(&entry.path(), &target);
        } else {
            fs::copy(entry.path(), target).unwrap();
        }
    }
}

/// Into a pipe there is no colour, whether it is forbidden or not (no-color.org).
#[test]
fn nothing_is_coloured_where_nobody_asked() {
    for (name, value) in [("NO_COLOR", "1"), ("TERM", "dumb")] {
        for arguments in [
            vec!["--help"],
            vec!["estimate"],
            vec!["estimate", "missing.toml"],
        ] {
            let output = winterledger()
                .env(name, value)
                .args(&arguments)
                .output()
                .unwrap();
            assert!(
                !output.stdout.contains(&0x1b) && !output.stderr.contains(&0x1b),
                "{arguments:?}"
            );
        }
    }
}
