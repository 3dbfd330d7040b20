use thiserror::Error;

/// Why a proof is not accepted.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[non_exhaustive]
pub enum ProofError {
    /// Another version.
    #[error("version {0} of the proof format is not known here")]
    Version(u32),
    /// The strength is 0 or above the number of factors.
    #[error("strength {0} makes no sense for this mix")]
    Strength(u32),
    /// A set is not the levels of t factors of the mix.
    #[error("{0:?} are not the levels of as many factors of the mix as the strength says")]
    Set(Vec<u16>),
    /// The divisor is not the least common multiple of the products of the sets.
    #[error("{0} is not the least common multiple of the products of the sets")]
    Divisor(u64),
    /// The bound is about a strength or about factors that the mix does not have.
    #[error("the bound is not about this mix: {0}")]
    Subject(String),
    /// The bound claims more than its theorem gives.
    #[error("the bound claims {claimed} runs where its theorem gives {given}")]
    Least {
        /// What the proof claims.
        claimed: u64,
        /// What the theorem gives.
        given: u64,
    },
    /// The number of runs does not follow from the bound and the divisor.
    #[error("{claimed} runs do not follow; the bound and the divisor give {given}")]
    Runs {
        /// What the proof claims.
        claimed: u64,
        /// What follows.
        given: u64,
    },
    /// An exclusion does not hold.
    #[error("that no array has exactly {runs} runs does not follow: {why}")]
    Exclusion {
        /// The number of runs.
        runs: u64,
        /// What is wrong.
        why: ExclusionError,
    },
    /// The certificate of the linear program does not hold.
    #[error("the certificate of the linear program does not hold: {0}")]
    Program(ExclusionError),
    /// Some number does not fit 64 bits.
    #[error("a number in the proof does not fit 64 bits")]
    TooLarge,
}

/// Why it does not follow that no array has exactly so many runs.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[non_exhaustive]
pub enum ExclusionError {
    /// Exclusions follow one another in steps of the divisor.
    #[error("the next number of runs to exclude is {expected}")]
    Order {
        /// The next multiple of the divisor.
        expected: u64,
    },
    /// A step asks for something that what came before it does not have.
    #[error("step {0} does not follow from what stands before it")]
    Step(usize),
    /// The steps lead to another request than the reason is about.
    #[error("the steps lead to {0}")]
    About(String),
    /// The weights are not a sorted list of different places with the signs the theorem demands.
    #[error("the weight at {0:?} is out of place or has the wrong sign")]
    Weight(Vec<u32>),
    /// The constant is not positive.
    #[error("the constant must be positive")]
    Constant,
    /// The polynomial of the weights is negative somewhere.
    #[error("the polynomial is negative at {0:?}")]
    Negative(Vec<u32>),
    /// The certificate holds but does not reach the number of runs.
    #[error("it holds, but does not reach this number of runs")]
    Weak,
    /// A recorded search was not made again, or gave something else.
    #[error("the record of the search is not confirmed: {0}")]
    Replay(String),
    /// The statement is not about this number of runs, strength or mix.
    #[error("the statement does not apply here")]
    Subject,
    /// The check would take too long.
    #[error("too large to be checked")]
    TooLarge,
}
