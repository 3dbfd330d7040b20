use crate::floor::FloorError;
use crate::hunt::campaign::{HuntError, RunError};
use crate::hunt::near::NearError;
use crate::seek::SeekError;
use crate::verify::JudgeError;

use super::ExitCode;

/// Why a command gave up: what it says and how the program ends.
pub(super) struct Failure {
    pub(super) code: ExitCode,
    pub(super) message: String,
}

impl Failure {
    /// The command line makes no sense.
    pub(super) fn usage(message: impl ToString) -> Self {
        Self { code: ExitCode::Usage, message: message.to_string() }
    }

    /// A file that cannot be read, or is not what it should be.
    pub(super) fn input(name: &str, message: impl std::fmt::Display) -> Self {
        Self { code: ExitCode::Input, message: format!("{name}: {message}") }
    }

    /// The end before an answer.
    pub(super) fn stopped(message: impl ToString) -> Self {
        Self { code: ExitCode::Stopped, message: message.to_string() }
    }
}

impl From<FloorError> for Failure {
    fn from(e: FloorError) -> Self {
        match e {
            FloorError::Strength { .. } => Self::usage(e),
            FloorError::TooLarge => Self::stopped(e),
        }
    }
}

impl From<SeekError> for Failure {
    fn from(e: SeekError) -> Self {
        match e {
            SeekError::Floor(e) => e.into(),
            e => Self::stopped(e),
        }
    }
}

impl From<HuntError> for Failure {
    fn from(e: HuntError) -> Self {
        match e {
            e @ HuntError::State { .. } => Self { code: ExitCode::Input, message: e.to_string() },
            e => Self::usage(e),
        }
    }
}

impl From<RunError> for Failure {
    fn from(e: RunError) -> Self {
        match e {
            RunError::Request(e) => e.into(),
            e => Self::stopped(e),
        }
    }
}

impl From<JudgeError> for Failure {
    fn from(e: JudgeError) -> Self {
        match e {
            JudgeError::Strength { .. } => Self::usage(e),
            e @ JudgeError::Disagreement { .. } => Self::stopped(e),
        }
    }
}

impl From<NearError> for Failure {
    fn from(e: NearError) -> Self {
        match e {
            NearError::Seek(e) => e.into(),
            NearError::Judge(e) => e.into(),
            NearError::TooLarge { .. } | NearError::Array(_) => Self::stopped(e),
            e => Self::usage(e),
        }
    }
}
