/// How the program ends.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[repr(u8)]
pub enum ExitCode {
    /// The answer is yes: an array was found, is orthogonal, a certificate or a proof holds.
    Yes = 0,
    /// The answer is no.
    No = 1,
    /// The command line makes no sense.
    Usage = 2,
    /// The input cannot be read, or is not what it should be.
    Input = 3,
    /// No answer: a limit was reached, the user interrupted, the output could not be written, or
    /// the program has a defect and says so.
    Stopped = 4,
}

impl From<ExitCode> for std::process::ExitCode {
    fn from(code: ExitCode) -> Self {
        Self::from(code as u8)
    }
}

#[cfg(test)]
mod tests {
    use super::ExitCode;

    #[test]
    fn the_codes_are_those_of_the_contract() {
        use ExitCode::{Input, No, Stopped, Usage, Yes};
        assert_eq!([Yes, No, Usage, Input, Stopped].map(|c| c as u8), [0, 1, 2, 3, 4]);
    }
}
