//! The words of the command line. Each flag is defined here once; help, man
//! page and completions are made from these definitions.

use std::path::PathBuf;

use clap::{Args, Parser, Subcommand, ValueEnum};

const EXAMPLES: &str = "\
Examples:
  orbend sweep SiF2 --bend 2-1-3=80..180:2 --out sif2.svg
  orbend shape SiF2 CF2 NF2
  orbend levels PF3
  orbend plan NF2 --out nf2.md
  orbend params Si F

";

/// Which way does this molecule bend, which orbitals trade places on the way,
/// and how far can that be trusted?
#[derive(Debug, Parser)]
#[command(
    name = "orbend",
    version,
    before_help = EXAMPLES,
    max_term_width = 96,
    color = clap::ColorChoice::Never
)]
pub(crate) struct Arguments {
    #[command(subcommand)]
    pub(crate) command: Command,
}

#[derive(Debug, Subcommand)]
pub(crate) enum Command {
    /// One geometry: energies, labels, occupations, populations
    Levels(LevelsArguments),
    /// The correlation (Walsh) diagram along a coordinate, or a grid over two
    Sweep(Box<SweepArguments>),
    /// The shape of a molecule, or of a series, with its reasons and its doubts
    Shape(ShapeArguments),
    /// What to compute next: start geometries, states, changes of roots, an active space
    Plan(Box<PlanArguments>),
    /// The parameter values in use, each with its source
    Params(ParamsArguments),
    /// Print a completion script for a shell
    Completions {
        /// The shell
        shell: clap_complete::Shell,
    },
    /// Print the manual page (roff)
    Man,
}

#[derive(Debug, Args)]
pub(crate) struct LevelsArguments {
    /// A file (XYZ, extended XYZ), `-` for standard input, or a formula
    pub(crate) geometry: String,
    #[command(flatten)]
    pub(crate) model: ModelArguments,
    #[command(flatten)]
    pub(crate) output: OutputArguments,
    /// Which vibrations the geometry gives in to, each tried by a short sweep
    #[arg(long)]
    pub(crate) distortions: bool,
    /// The molecule as fragments: "1,2,3 | 4-9 (-1)" (atoms from 1, charges in brackets); a figure is
    /// the interaction diagram then
    #[arg(long, value_name = "FRAGMENTS")]
    pub(crate) fragments: Option<String>,
    #[command(flatten)]
    pub(crate) surface: SurfaceArguments,
    /// Threads; the output is the same bytes for every number
    #[arg(long, value_name = "N")]
    pub(crate) jobs: Option<usize>,
}

#[derive(Debug, Args)]
#[command(next_help_heading = "Surface")]
pub(crate) struct SurfaceArguments {
    /// Surfaces of these orbitals, side by side, in a .glb file: 5a1,6e or 6e:1 for one of a set
    #[arg(long, value_name = "LABELS", value_delimiter = ',')]
    pub(crate) surface: Vec<String>,
    /// Share of the density that a surface encloses, 0.01 to 0.99
    #[arg(
        long,
        value_name = "SHARE",
        default_value_t = 0.8,
        allow_hyphen_values = true
    )]
    pub(crate) share: f64,
}

#[derive(Debug, Args)]
pub(crate) struct SweepArguments {
    /// A file (XYZ, extended XYZ), `-` for standard input, or a formula
    pub(crate) geometry: String,
    #[command(flatten)]
    pub(crate) coordinates: CoordinateArguments,
    #[command(flatten)]
    pub(crate) model: ModelArguments,
    #[command(flatten)]
    pub(crate) output: OutputArguments,
    #[command(flatten)]
    pub(crate) figure: FigureArguments,
    /// The molecule as fragments along the path: "1,2,3 | 4-9 (-1)"
    #[arg(long, value_name = "FRAGMENTS")]
    pub(crate) fragments: Option<String>,
    /// Why a line moves, term by term: 5a1, homo, or between two values 5a1@92..180 (may be repeated)
    #[arg(long, value_name = "LINE[@FROM..TO]", allow_hyphen_values = true)]
    pub(crate) why: Vec<String>,
    /// Charges, overlap populations, shares and tags of every level in the document
    #[arg(long)]
    pub(crate) populations: bool,
    /// Every line's names along the path instead of the usual text
    #[arg(long, conflicts_with = "json")]
    pub(crate) passport: bool,
    /// Threads; the output is the same bytes for every number
    #[arg(long, value_name = "N")]
    pub(crate) jobs: Option<usize>,
}

#[derive(Debug, Args)]
pub(crate) struct PlanArguments {
    /// A file (XYZ, extended XYZ), `-` for standard input, or a formula; without a coordinate the path
    /// is the bend or the pyramid that `orbend shape` looks at
    pub(crate) geometry: String,
    #[command(flatten)]
    pub(crate) coordinates: CoordinateArguments,
    #[command(flatten)]
    pub(crate) model: ModelArguments,
    #[command(flatten)]
    pub(crate) output: PlanOutputArguments,
    /// Threads; the output is the same bytes for every number
    #[arg(long, value_name = "N")]
    pub(crate) jobs: Option<usize>,
}

#[derive(Debug, Args)]
#[command(next_help_heading = "Output")]
pub(crate) struct PlanOutputArguments {
    /// The result document on standard output, alone
    #[arg(long)]
    pub(crate) json: bool,
    /// Write a file; the ending chooses .json, .md (one page for a notebook), .xyz (all start geometries
    /// with charge and unpaired electrons) or .qcschema.json (the first one as QCSchema molecule)
    #[arg(long, value_name = "FILE")]
    pub(crate) out: Vec<PathBuf>,
    /// Which numbering labels show first; the document always has both
    #[arg(long, value_enum, default_value_t = NumberingChoice::Core)]
    pub(crate) numbering: NumberingChoice,
}

#[derive(Debug, Args)]
pub(crate) struct ShapeArguments {
    /// Files (XYZ, extended XYZ), `-`, or formulas; several make a series
    #[arg(required = true)]
    pub(crate) geometries: Vec<String>,
    /// Charge of the molecule
    #[arg(long, value_name = "Q", allow_hyphen_values = true)]
    pub(crate) charge: Option<i32>,
    /// A series of charges of the same atoms: -1..+2
    #[arg(
        long,
        value_name = "FROM..TO",
        allow_hyphen_values = true,
        conflicts_with = "charge"
    )]
    pub(crate) charges: Option<String>,
    /// Unpaired electrons, or `all` fillings within 10 eV [default: the lowest possible]
    #[arg(long, value_name = "N|all")]
    pub(crate) unpaired: Option<String>,
    /// An explicit configuration of valence levels: "2a1:2 1b2:2 3a1:1 1b1:1"
    #[arg(long, value_name = "CONFIGURATION")]
    pub(crate) occupy: Option<String>,
    /// The atom about which the shape is judged, counted from 1 [default: the only one possible]
    #[arg(long, value_name = "ATOM")]
    pub(crate) centre: Option<usize>,
    /// Judge along this angle instead of the usual coordinate, degrees: 2-1-3=80..180:5
    #[arg(
        long,
        value_name = "A-B-C=FROM..TO:STEP",
        allow_hyphen_values = true,
        group = "along",
        conflicts_with = "centre"
    )]
    pub(crate) bend: Option<String>,
    /// Judge along this distance, Å: 1-2=0.8..1.6:0.05 (the method gives no bond lengths)
    #[arg(
        long,
        value_name = "A-B=FROM..TO:STEP",
        allow_hyphen_values = true,
        group = "along",
        conflicts_with = "centre"
    )]
    pub(crate) stretch: Option<String>,
    /// Judge along this torsion, degrees: 3-1-2-4=0..180:10
    #[arg(
        long,
        value_name = "A-B-C-D=FROM..TO:STEP",
        allow_hyphen_values = true,
        group = "along",
        conflicts_with = "centre"
    )]
    pub(crate) twist: Option<String>,
    /// Judge along the common angle at a three-coordinate atom, degrees: 1=90..120:2
    #[arg(
        long,
        value_name = "A=FROM..TO:STEP",
        allow_hyphen_values = true,
        group = "along",
        conflicts_with = "centre"
    )]
    pub(crate) pyramid: Option<String>,
    /// Show the leading sum with the pair repulsion of the atoms added (Anderson & Hoffmann 1974)
    #[arg(long)]
    pub(crate) repulsion: bool,
    /// Parameter set, or a TOML file that overlays the default set
    #[arg(long, value_name = "SET|FILE")]
    pub(crate) params: Option<String>,
    /// A named variant of one element's values: S:B (may be repeated)
    #[arg(long, value_name = "ELEMENT:VARIANT")]
    pub(crate) variant: Vec<String>,
    /// Bond length in an ideal geometry, Å: Si-F=1.59 (may be repeated)
    #[arg(long, value_name = "A-B=LENGTH")]
    pub(crate) bond: Vec<String>,
    /// Unit of the numbers in a geometry file
    #[arg(long, value_enum, default_value_t = UnitChoice::Angstrom)]
    pub(crate) unit: UnitChoice,
    /// How far atoms may be from a symmetry operation, Å
    #[arg(long, value_name = "Å", default_value_t = 0.001)]
    pub(crate) tolerance: f64,
    #[command(flatten)]
    pub(crate) output: OutputArguments,
    /// Threads; the output is the same bytes for every number
    #[arg(long, value_name = "N")]
    pub(crate) jobs: Option<usize>,
}

#[derive(Debug, Args)]
#[command(next_help_heading = "Coordinates")]
pub(crate) struct CoordinateArguments {
    /// Angle at the middle atom, degrees: 2-1-3=90..180:2 (from..to:step)
    #[arg(long, value_name = "A-B-C=FROM..TO:STEP", allow_hyphen_values = true)]
    pub(crate) bend: Vec<String>,
    /// Distance, Å: 1-2=0.8..1.6:0.05
    #[arg(long, value_name = "A-B=FROM..TO:STEP", allow_hyphen_values = true)]
    pub(crate) stretch: Vec<String>,
    /// Torsion, degrees: 3-1-2-4=0..180:5
    #[arg(long, value_name = "A-B-C-D=FROM..TO:STEP", allow_hyphen_values = true)]
    pub(crate) twist: Vec<String>,
    /// Common ligand–centre–ligand angle at a three-coordinate atom, degrees: 1=90..120:1
    #[arg(long, value_name = "A=FROM..TO:STEP", allow_hyphen_values = true)]
    pub(crate) pyramid: Vec<String>,
    /// Moves in step with the first coordinate: 2-1-3=100..120:2 (as many points)
    #[arg(long, value_name = "A-B-C=FROM..TO:STEP", allow_hyphen_values = true)]
    pub(crate) with_bend: Vec<String>,
    /// Moves in step with the first coordinate: 1-2=1.60..1.55:-0.005
    #[arg(long, value_name = "A-B=FROM..TO:STEP", allow_hyphen_values = true)]
    pub(crate) with_stretch: Vec<String>,
    /// Moves in step with the first coordinate
    #[arg(long, value_name = "A-B-C-D=FROM..TO:STEP", allow_hyphen_values = true)]
    pub(crate) with_twist: Vec<String>,
    /// Moves in step with the first coordinate
    #[arg(long, value_name = "A=FROM..TO:STEP", allow_hyphen_values = true)]
    pub(crate) with_pyramid: Vec<String>,
    /// A CSV table of coordinate values: a heading such as `bend 2-1-3,stretch 1-2`, one row per point
    #[arg(long, value_name = "FILE", conflicts_with_all = ["toward", "along_mode"])]
    pub(crate) table: Option<PathBuf>,
    /// A path from this geometry to that of another file
    #[arg(long, value_name = "FILE", conflicts_with = "along_mode")]
    pub(crate) toward: Option<PathBuf>,
    /// Points of the path to another geometry
    #[arg(long, value_name = "N", default_value_t = 41)]
    pub(crate) steps: usize,
    /// Atoms of this geometry and what they become in that of --toward: 7=10,8=9 [default: all matched]
    #[arg(
        long,
        value_name = "ATOM=ATOM,…",
        requires = "toward",
        value_delimiter = ','
    )]
    pub(crate) map: Vec<String>,
    /// Match atoms so that the path to the other geometry keeps this point group: C2, Cs …
    #[arg(long, value_name = "GROUP", requires = "toward")]
    pub(crate) keep: Option<String>,
    /// Along the displacement vectors of an extended XYZ file: amplitudes -1..1:0.1
    #[arg(long, value_name = "FROM..TO:STEP", allow_hyphen_values = true)]
    pub(crate) along_mode: Option<String>,
    /// Move the named atoms only, not their partners by symmetry
    #[arg(long)]
    pub(crate) alone: bool,
}

#[derive(Debug, Args)]
#[command(next_help_heading = "Model")]
pub(crate) struct ModelArguments {
    /// Charge of the molecule
    #[arg(long, value_name = "Q", allow_hyphen_values = true)]
    pub(crate) charge: Option<i32>,
    /// Unpaired electrons [default: the lowest possible]
    #[arg(long, value_name = "N")]
    pub(crate) unpaired: Option<u32>,
    /// An explicit configuration of valence levels: "1b2:2 3a1:1 1b1:1"
    #[arg(long, value_name = "CONFIGURATION")]
    pub(crate) occupy: Option<String>,
    /// Parameter set, or a TOML file that overlays the default set
    #[arg(long, value_name = "SET|FILE")]
    pub(crate) params: Option<String>,
    /// A named variant of one element's values: S:B (may be repeated)
    #[arg(long, value_name = "ELEMENT:VARIANT")]
    pub(crate) variant: Vec<String>,
    /// Form of the off-diagonal elements
    #[arg(long, value_enum, default_value_t = CouplingChoice::Constant)]
    pub(crate) coupling: CouplingChoice,
    /// Wolfsberg–Helmholz constant K
    #[arg(long, value_name = "K", default_value_t = 1.75)]
    pub(crate) k: f64,
    /// Bond length in an ideal geometry, Å: Si-F=1.59 (may be repeated)
    #[arg(long, value_name = "A-B=LENGTH")]
    pub(crate) bond: Vec<String>,
    /// Unit of the numbers in a geometry file
    #[arg(long, value_enum, default_value_t = UnitChoice::Angstrom)]
    pub(crate) unit: UnitChoice,
    /// Move the atoms onto the group that they have within this distance, Å
    #[arg(long, value_name = "Å")]
    pub(crate) symmetrize: Option<f64>,
    /// How far atoms may be from a symmetry operation, Å
    #[arg(long, value_name = "Å", default_value_t = 0.001)]
    pub(crate) tolerance: f64,
}

#[derive(Debug, Args)]
#[command(next_help_heading = "Output")]
pub(crate) struct OutputArguments {
    /// The result document on standard output, alone
    #[arg(long)]
    pub(crate) json: bool,
    /// Write a file; the ending chooses .json, .csv, .svg, .png, .pdf, .html (a page), .glb (surfaces) or .xyz (may be repeated)
    #[arg(long, value_name = "FILE")]
    pub(crate) out: Vec<PathBuf>,
    /// Which numbering labels show first; the document always has both
    #[arg(long, value_enum, default_value_t = NumberingChoice::Core)]
    pub(crate) numbering: NumberingChoice,
}

#[derive(Debug, Args)]
#[command(next_help_heading = "Figure")]
pub(crate) struct FigureArguments {
    /// Width of the figure
    #[arg(long, value_enum, default_value_t = WidthChoice::Column)]
    pub(crate) width: WidthChoice,
    /// Colours of the figure
    #[arg(long, value_enum, default_value_t = ThemeChoice::Light)]
    pub(crate) theme: ThemeChoice,
    /// Energy window of the figure, eV: -20..0
    #[arg(long, value_name = "FROM..TO", allow_hyphen_values = true)]
    pub(crate) energies: Option<String>,
    /// Unit of the figure's energy axes
    #[arg(long, value_enum, default_value_t = EnergyUnitChoice::ElectronVolt)]
    pub(crate) energy_unit: EnergyUnitChoice,
    /// Draw the electrons at this value of the coordinate [default: where the lines are apart]
    #[arg(long, value_name = "VALUE", allow_hyphen_values = true)]
    pub(crate) electrons_at: Option<f64>,
    /// A document of `orbend shape` (.json): its verdict's angle and range in the panel of the sum
    #[arg(long, value_name = "FILE")]
    pub(crate) shape: Option<PathBuf>,
    /// Contour pictures of the orbitals beside the labels (ψ = ±0.05 bohr^(-3/2); filled is positive)
    #[arg(long)]
    pub(crate) orbitals: bool,
    /// What a line of the figure keeps: its place in the energy order of its irrep, or its character
    #[arg(long, value_enum, default_value_t = FollowChoice::Energy)]
    pub(crate) follow: FollowChoice,
    /// Only these lines in the figure, by label: 4a1,2b2
    #[arg(long, value_name = "LABELS", value_delimiter = ',')]
    pub(crate) lines: Vec<String>,
    /// Text of an SVG or PDF figure as outlines, for printers that refuse live text
    #[arg(long)]
    pub(crate) outline_text: bool,
    /// Dots per inch of a PNG figure
    #[arg(long, value_name = "N", default_value_t = 600.0)]
    pub(crate) dpi: f64,
}

#[derive(Debug, Args)]
pub(crate) struct ParamsArguments {
    /// Elements to show [default: all of the set]
    pub(crate) elements: Vec<String>,
    /// Parameter set, or a TOML file that overlays the default set
    #[arg(long, value_name = "SET|FILE")]
    pub(crate) params: Option<String>,
    /// A named variant of one element's values: S:B (may be repeated)
    #[arg(long, value_name = "ELEMENT:VARIANT")]
    pub(crate) variant: Vec<String>,
    /// The document on standard output
    #[arg(long)]
    pub(crate) json: bool,
    /// Write a file (.json; may be repeated)
    #[arg(long, value_name = "FILE")]
    pub(crate) out: Vec<PathBuf>,
}

#[derive(Clone, Copy, Debug, ValueEnum)]
pub(crate) enum CouplingChoice {
    /// K S (Hii + Hjj)/2 (Hoffmann 1963)
    Constant,
    /// K' with the difference of Hii and Hjj (Ammeter et al. 1978)
    Weighted,
}

#[derive(Clone, Copy, Debug, ValueEnum)]
pub(crate) enum UnitChoice {
    Angstrom,
    Bohr,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub(crate) enum NumberingChoice {
    Core,
    Valence,
}

#[derive(Clone, Copy, Debug, ValueEnum)]
pub(crate) enum WidthChoice {
    /// 84 mm, one column of a journal
    Column,
    /// 174 mm, a whole page width
    Page,
    /// for a talk
    Slide,
}

#[derive(Clone, Copy, Debug, ValueEnum)]
pub(crate) enum FollowChoice {
    /// lines of one irrep repel
    Energy,
    /// lines of one irrep pass each other where they exchange character
    Character,
}

#[derive(Clone, Copy, Debug, ValueEnum)]
pub(crate) enum EnergyUnitChoice {
    #[value(name = "eV", alias = "ev")]
    ElectronVolt,
    #[value(name = "hartree")]
    Hartree,
}

#[derive(Clone, Copy, Debug, ValueEnum)]
pub(crate) enum ThemeChoice {
    Light,
    Dark,
    Grey,
}
