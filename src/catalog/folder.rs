//! The files of a catalogue's folder.

use std::fs;
use std::io;
use std::path::{Path, PathBuf};
use std::sync::Arc;

use super::fault::{Fault, Severity};
use super::model::Place;

/// One file with its bytes.
#[derive(Debug)]
pub(super) struct File {
    pub(super) path: Arc<PathBuf>,
    pub(super) bytes: Vec<u8>,
}

/// Reads every `*.yaml` and `*.yml` under a folder, in order of path. Hidden names are left out,
/// links to files followed, links to folders not.
pub(super) fn read_folder(folder: &Path) -> (Vec<File>, Vec<Fault>) {
    let mut paths = Vec::new();
    let mut faults = Vec::new();
    walk(folder, true, &mut paths, &mut faults);
    paths.sort();
    let mut files = Vec::with_capacity(paths.len());
    for path in paths {
        match fs::read(&path) {
            Ok(bytes) => files.push(File { path: Arc::new(path), bytes }),
            Err(error) => faults.push(unreadable(&path, &error)),
        }
    }
    (files, faults)
}

fn walk(folder: &Path, top: bool, paths: &mut Vec<PathBuf>, faults: &mut Vec<Fault>) {
    let entries = match fs::read_dir(folder) {
        Ok(entries) => entries,
        Err(error) => {
            let mut fault = unreadable(folder, &error);
            if top {
                fault.hint = Some("name the folder of part records with --catalog".to_owned());
            }
            faults.push(fault);
            return;
        }
    };
    for entry in entries {
        let entry = match entry {
            Ok(entry) => entry,
            Err(error) => {
                faults.push(unreadable(folder, &error));
                continue;
            }
        };
        if entry.file_name().as_encoded_bytes().starts_with(b".") {
            continue;
        }
        let path = entry.path();
        let own = match entry.file_type() {
            Ok(own) => own,
            Err(error) => {
                faults.push(unreadable(&path, &error));
                continue;
            }
        };
        if own.is_dir() {
            walk(&path, false, paths, faults);
            continue;
        }
        let is_yaml = path.extension().is_some_and(|name| name == "yaml" || name == "yml");
        if !is_yaml {
            continue;
        }
        // Follows a link; one to a folder, or to no regular file, is not a record file.
        match fs::metadata(&path) {
            Ok(target) if target.is_file() => paths.push(path),
            Ok(_) => {}
            Err(error) => {
                let mut fault = unreadable(&path, &error);
                if own.is_symlink() {
                    fault.message = format!("a link that leads nowhere: {error}");
                    fault.hint = Some("mend the link or remove it".to_owned());
                }
                faults.push(fault);
            }
        }
    }
}

fn unreadable(path: &Path, error: &io::Error) -> Fault {
    Fault {
        place: Place { file: Arc::new(path.to_owned()), line: 1, column: 1 },
        severity: Severity::Error,
        record: None,
        field: None,
        message: format!("cannot be read: {error}"),
        hint: None,
    }
}
