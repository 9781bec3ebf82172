//! What can be typed after `topheavy`.

use clap::{Args, Parser, Subcommand, ValueEnum};

/// Checks the design of a vertically vibrated stack of gas and liquid layers: which faces hold, which raise waves,
/// and by what margin.
#[derive(Debug, Parser)]
#[command(name = "topheavy", version, max_term_width = 100)]
pub struct Arguments {
    /// What to do.
    #[command(subcommand)]
    pub command: Command,
}

/// The commands.
#[derive(Debug, Subcommand)]
pub enum Command {
    /// Check setup files and report what is found
    Check(Check),
    /// The vertical response: how each slab moves, the cushions, the natural frequencies
    Chain(Chain),
    /// Growth and marginal accelerations of one slab at given wavenumbers
    Curve(Curve),
    /// What a finding means, why it matters and what to do
    Why(Why),
    /// The JSON Schema of the setup file (draft 07)
    Schema,
    /// Serve an editor over standard input and output (Language Server Protocol)
    Serve,
}

/// Options of `check`.
#[derive(Debug, Args)]
pub struct Check {
    /// Setup files or folders; folders are searched for *.stack.toml, ignore files are honoured; `-` reads standard
    /// input. Nothing: the root of the project that the current folder is in
    pub paths: Vec<String>,
    /// The name that standard input goes by
    #[arg(long = "as", value_name = "NAME", default_value = "standard-input.stack.toml")]
    pub name: String,
    /// How to print
    #[arg(long, value_enum, default_value_t = Format::Text)]
    pub format: Format,
    /// In which units JSON counts characters
    #[arg(long, value_enum, default_value_t = Positions::Utf32, value_name = "ENCODING")]
    pub positions: Positions,
    /// Also search for changes of a value that clear a finding; each is tried before it is shown
    #[arg(long)]
    pub with_fixes: bool,
    /// The mildest finding that makes the exit code 1 (accepted findings do not count)
    #[arg(long, value_enum, default_value_t = Refuse::Error, value_name = "SEVERITY")]
    pub refuse: Refuse,
    /// Exit with 0 although something could not be looked at
    #[arg(long)]
    pub allow_incomplete: bool,
}

/// Options of `chain`.
#[derive(Debug, Args)]
pub struct Chain {
    /// Setup file, or `-`
    pub file: String,
    /// Also over a range of frequencies, such as "20 Hz to 300 Hz"
    #[arg(long, value_name = "RANGE")]
    pub sweep: Option<String>,
    /// Frequencies of the sweep, evenly spaced on a logarithmic scale
    #[arg(long, value_name = "NUMBER", default_value_t = 101, value_parser = clap::value_parser!(u32).range(2..=20_000))]
    pub points: u32,
    /// How to print
    #[arg(long, value_enum, default_value_t = Format::Text)]
    pub format: Format,
}

/// Options of `curve`.
#[derive(Debug, Args)]
#[command(group = clap::ArgGroup::new("where").required(true).args(["wavenumber", "wavelength"]))]
pub struct Curve {
    /// Setup file, or `-`
    pub file: String,
    /// Any liquid layer of the slab
    #[arg(long, value_name = "NAME")]
    pub slab: String,
    /// Wavenumbers, such as "120 1/m, 340 1/m"
    #[arg(long, value_name = "LIST")]
    pub wavenumber: Option<String>,
    /// Wavelengths, such as "12 mm, 25 mm"
    #[arg(long, value_name = "LIST")]
    pub wavelength: Option<String>,
    /// The slab's own acceleration, such as "35 g0 peak"; nothing: the computed one
    #[arg(long, value_name = "ACCELERATION")]
    pub acceleration: Option<String>,
    /// Largest marginal acceleration to look for, such as "100 g0"
    #[arg(long, value_name = "ACCELERATION")]
    pub up_to: Option<String>,
    /// How to print
    #[arg(long, value_enum, default_value_t = Format::Text)]
    pub format: Format,
}

/// Options of `why`.
#[derive(Debug, Args)]
pub struct Why {
    /// Name of a finding; nothing: the list of all
    pub name: Option<String>,
}

/// How results are printed.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub enum Format {
    /// For people: with the lines concerned on a terminal, one line a finding in a pipe
    Text,
    /// One JSON document
    Json,
}

/// Units in which characters of a line are counted.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub enum Positions {
    /// Bytes
    #[value(name = "utf-8")]
    Utf8,
    /// Two-byte units
    #[value(name = "utf-16")]
    Utf16,
    /// Code points
    #[value(name = "utf-32")]
    Utf32,
}

/// Severities that `--refuse` takes.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub enum Refuse {
    /// Only errors
    Error,
    /// Warnings too
    Warning,
    /// Everything but hints
    Information,
}
