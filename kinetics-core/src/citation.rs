//! Published sources, as values, so that page, record and code name the same ones.

use serde::Serialize;

/// A published source of a method or a figure.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize)]
pub struct Citation {
    /// Authors, as printed.
    pub authors: &'static str,
    /// Year of publication.
    pub year: u16,
    /// Journal or publisher, volume, page.
    pub place: &'static str,
    /// What it is cited for.
    pub used_for: &'static str,
}

macro_rules! citations {
    ($($(#[$doc:meta])* $name:ident = $authors:literal, $year:literal, $place:literal, $for:literal;)*) => {
        $($(#[$doc])* pub const $name: Citation =
            Citation { authors: $authors, year: $year, place: $place, used_for: $for };)*
    };
}

citations! {
    /// The Arrhenius equation.
    ARRHENIUS = "S. Arrhenius", 1889, "Z. Phys. Chem. 4, 226", "the exponential law of k and T";
    /// The Eyring equation.
    EYRING = "H. Eyring", 1935, "J. Chem. Phys. 3, 107", "the Eyring law, ΔH‡ and ΔS‡";
    /// Centring at a reference temperature.
    REFERENCE_TEMPERATURE = "M. Schwaab and J. C. Pinto", 2007, "Chem. Eng. Sci. 62, 2750",
        "the reference temperature that keeps k and Ea apart";
    /// QR for least squares.
    LEAST_SQUARES = "Å. Björck", 1996, "Numerical Methods for Least Squares Problems, SIAM",
        "weighted least squares by QR";
    /// Nonlinear least squares.
    LEVENBERG_MARQUARDT = "J. J. Moré", 1978, "Numerical Analysis (ed. G. A. Watson), Springer, 105",
        "nonlinear least squares of progress curves (Levenberg and Marquardt's method)";
    /// Linear parameters eliminated.
    VARIABLE_PROJECTION = "G. H. Golub and V. Pereyra", 1973, "SIAM J. Numer. Anal. 10, 413",
        "starts and ends of signals eliminated from that search";
    /// Ranking by AICc.
    MODEL_SELECTION = "K. P. Burnham and D. R. Anderson", 2002,
        "Model Selection and Multimodel Inference, 2nd ed., Springer", "orders compared by AICc";
    /// Bartlett's test.
    HOMOGENEITY = "M. S. Bartlett", 1937, "Proc. R. Soc. London A 160, 268",
        "whether the noise of runs is one";
    /// Q-profile interval of the run-to-run variance.
    Q_PROFILE = "W. Viechtbauer", 2007, "Stat. Med. 26, 37",
        "what the data say of the scatter between runs";
    /// Generalised inference.
    GENERALISED_INFERENCE = "H. K. Iyer, C. M. Wang and T. Mathew", 2004,
        "J. Am. Stat. Assoc. 99, 1060", "intervals averaged over that scatter";
    /// Regression intervals and diagnostics.
    REGRESSION = "N. R. Draper and H. Smith", 1998, "Applied Regression Analysis, 3rd ed., Wiley",
        "confidence and prediction intervals of a line, F test of a further term";
    /// Influence.
    INFLUENCE = "R. D. Cook", 1977, "Technometrics 19, 15", "the influence of single runs";
    /// Where to measure next.
    SEQUENTIAL_DESIGN = "V. G. Dovì, A. P. Reverberi and L. Acevedo-Duarte", 1994,
        "Ind. Eng. Chem. Res. 33, 62", "the next measurement that narrows an answer most";
    /// Constants.
    CONSTANTS = "CODATA", 2022, "recommended values, exact since the 2019 SI", "R, k_B and h";
}

impl Citation {
    /// One line for a list of references.
    pub fn line(&self) -> String {
        format!("{} {}, {}: {}.", self.authors, self.year, self.place, self.used_for)
    }
}
