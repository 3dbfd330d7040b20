use std::collections::BTreeSet;
use std::fs::{self, File};
use std::io::{self, BufWriter, Write};
use std::path::{Path, PathBuf};
use std::sync::atomic::{AtomicBool, Ordering};
use std::sync::{Mutex, PoisonError};

use tempfile::NamedTempFile;

use super::{ExitCode, Failure};

/// Unfinished files, to be removed when somebody interrupts.
static UNFINISHED: Mutex<BTreeSet<PathBuf>> = Mutex::new(BTreeSet::new());

fn unfinished() -> std::sync::MutexGuard<'static, BTreeSet<PathBuf>> {
    UNFINISHED.lock().unwrap_or_else(PoisonError::into_inner)
}

/// Whether the command that runs ends by itself when it is told to.
static LISTENS: AtomicBool = AtomicBool::new(false);
/// Whether it was told to.
static INTERRUPTED: AtomicBool = AtomicBool::new(false);

/// From now on an interrupt is only noted, the first one at least.
pub(super) fn listen() {
    LISTENS.store(true, Ordering::Relaxed);
}

/// Whether there was an interrupt since [`listen`].
pub(super) fn interrupted() -> bool {
    INTERRUPTED.load(Ordering::Relaxed)
}

/// From now on an interrupt removes unfinished files and ends with the code for it.
pub(super) fn clean_up_on_interrupt() {
    // Where no handler can be set, the system's own way of ending remains.
    let _ = ctrlc::set_handler(|| {
        if LISTENS.load(Ordering::Relaxed) && !INTERRUPTED.swap(true, Ordering::Relaxed) {
            return;
        }
        for path in unfinished().iter() {
            let _ = fs::remove_file(path);
        }
        remark("error: interrupted; no file was written");
        std::process::exit(ExitCode::Stopped as i32);
    });
}

/// Says something on stderr.
pub(super) fn remark(text: &str) {
    // Nobody listens when this fails, so nobody can be told.
    let _ = writeln!(io::stderr(), "{text}");
}

/// Puts data on stdout.
pub(super) fn data(text: &str) -> Result<(), Failure> {
    let mut out = io::stdout().lock();
    unless_closed(out.write_all(text.as_bytes()).and_then(|()| out.flush())).map(drop)
}

/// Whether the reader is still there; other errors are failures.
pub(super) fn unless_closed(done: io::Result<()>) -> Result<bool, Failure> {
    match done {
        Ok(()) => Ok(true),
        Err(e) if e.kind() == io::ErrorKind::BrokenPipe => Ok(false),
        Err(e) => Err(Failure::stopped(format!("the output cannot be written: {e}"))),
    }
}

/// Where data goes: stdout, a file in the making, or something like a device.
pub(super) enum Output {
    Stdout,
    Made { file: BufWriter<NamedTempFile>, target: PathBuf },
    Direct { file: BufWriter<File>, target: PathBuf },
}

impl Output {
    /// Opens the output before the long work: a temporary file beside its target, so that the
    /// target appears whole or not at all; stdout for `-` or nothing. What is no regular file, such
    /// as a device or a named pipe, is written to directly.
    pub(super) fn open(name: Option<&str>) -> Result<Self, Failure> {
        let Some(name) = name.filter(|n| *n != "-") else { return Ok(Self::Stdout) };
        // Only the kind: the whole message would name the temporary file.
        let fail = |e: io::Error| Failure::usage(format!("{name} cannot be written: {}", e.kind()));
        let target = fs::canonicalize(name).unwrap_or_else(|_| name.into());
        match fs::metadata(&target) {
            Ok(known) if known.is_dir() => {
                return Err(Failure::usage(format!("{name} is a directory; name a file in it")));
            }
            Ok(known) if !known.is_file() => {
                let file = BufWriter::new(File::options().write(true).open(&target).map_err(fail)?);
                return Ok(Self::Direct { file, target });
            }
            _ => {}
        }
        let folder = target.parent().filter(|p| !p.as_os_str().is_empty()).unwrap_or(Path::new("."));
        let mut builder = tempfile::Builder::new();
        builder.prefix(".trysquare-").suffix(".unfinished");
        #[cfg(unix)]
        {
            use std::os::unix::fs::PermissionsExt;
            // As for any new file; the umask takes away what it should.
            builder.permissions(fs::Permissions::from_mode(0o666));
        }
        let file = builder.tempfile_in(folder).map_err(fail)?;
        unfinished().insert(file.path().to_owned());
        Ok(Self::Made { file: BufWriter::new(file), target })
    }

    /// Writes; says whether the reader is still there.
    pub(super) fn write(
        &mut self,
        write: impl FnOnce(&mut dyn Write) -> io::Result<()>,
    ) -> Result<bool, Failure> {
        match self {
            Self::Stdout => {
                let mut out = BufWriter::new(io::stdout().lock());
                unless_closed(write(&mut out).and_then(|()| out.flush()))
            }
            Self::Made { file, .. } => unless_closed(write(file)),
            Self::Direct { file, .. } => unless_closed(write(file).and_then(|()| file.flush())),
        }
    }

    /// Gives the finished file its name.
    pub(super) fn finish(self) -> Result<(), Failure> {
        let fail = |target: &Path, e: io::Error| {
            Failure::stopped(format!("{} cannot be written: {e}", target.display()))
        };
        match self {
            Self::Stdout => Ok(()),
            Self::Direct { mut file, target } => file.flush().map_err(|e| fail(&target, e)),
            Self::Made { file, target } => {
                let file = file.into_inner().map_err(|e| fail(&target, e.into_error()))?;
                let made = file.path().to_owned();
                let done = file.persist(&target).map_err(|e| fail(&target, e.error));
                unfinished().remove(&made);
                done.map(drop)
            }
        }
    }
}

/// Refuses outputs that would overwrite each other or an input.
pub(super) fn distinct(inputs: &[&str], outputs: &[Option<&str>]) -> Result<(), Failure> {
    let real = |name: &str| fs::canonicalize(name).unwrap_or_else(|_| name.into());
    let mut seen: Vec<PathBuf> = inputs.iter().filter(|n| **n != "-").map(|n| real(n)).collect();
    for name in outputs.iter().flatten().filter(|n| **n != "-") {
        let path = real(name);
        // Devices may be named as often as one likes.
        if seen.contains(&path) && fs::metadata(&path).map_or(true, |m| m.is_file()) {
            return Err(Failure::usage(format!("{name} is named twice; name another file to write to")));
        }
        seen.push(path);
    }
    Ok(())
}

/// Puts one line on stdout at once.
pub(super) fn line(text: &str) -> io::Result<()> {
    let mut out = io::stdout().lock();
    writeln!(out, "{text}").and_then(|()| out.flush())
}
