//! The models of the NIST nonlinear sets, each with its linear parameters apart.

/// A model at one abscissa: offset + Σ basis·c, and the slopes of both.
pub struct Point {
    pub offset: f64,
    pub offset_slopes: Vec<f64>,
    pub basis: Vec<f64>,
    /// For each nonlinear parameter, one slope for each part of the basis.
    pub basis_slopes: Vec<Vec<f64>>,
}

/// A model of an abscissa and its nonlinear parameters; none where it has no value.
pub type Local = fn(&[f64], &[f64]) -> Option<Point>;

/// Which parameters of a set's model are linear, counted from 0, and the model.
pub fn local(name: &str) -> (&'static [usize], Local) {
    match name {
        "Bennett5" => (&[0], bennett),
        "BoxBOD" | "Misra1a" => (&[0], saturating),
        "Misra1b" => (&[0], misra_b),
        "Chwirut1" | "Chwirut2" => (&[], chwirut),
        "DanWood" => (&[0], power),
        "Eckerle4" => (&[0], peak),
        "Hahn1" | "Thurber" => (&[0, 1, 2, 3], cubics),
        "Lanczos1" | "Lanczos3" => (&[0, 2, 4], three_decays),
        "MGH09" => (&[0], quadratics),
        "MGH10" => (&[0], vapour),
        "MGH17" => (&[0, 1, 2], two_decays),
        "Nelson" => (&[0, 1], nelson),
        "Rat42" => (&[0], logistic),
        "Rat43" => (&[0], richards),
        other => panic!("no model of {other}"),
    }
}

/// One part of a basis with its slopes, times a linear parameter.
fn scaled(value: f64, slopes: &[f64]) -> Option<Point> {
    several(vec![value], slopes.iter().map(|slope| vec![*slope]).collect())
}

fn several(basis: Vec<f64>, basis_slopes: Vec<Vec<f64>>) -> Option<Point> {
    let finite = basis.iter().chain(basis_slopes.iter().flatten()).all(|v| v.is_finite());
    let offset_slopes = vec![0.0; basis_slopes.len()];
    finite.then_some(Point { offset: 0.0, offset_slopes, basis, basis_slopes })
}

/// b1 (b2 + x)^(−1/b3)
fn bennett(x: &[f64], a: &[f64]) -> Option<Point> {
    let sum = a[0] + x[0];
    let value = sum.powf(-1.0 / a[1]);
    scaled(value, &[-value / (a[1] * sum), value * sum.ln() / (a[1] * a[1])])
}

/// b1 (1 − exp(−b2 x))
fn saturating(x: &[f64], a: &[f64]) -> Option<Point> {
    scaled(-(-a[0] * x[0]).exp_m1(), &[x[0] * (-a[0] * x[0]).exp()])
}

/// b1 (1 − (1 + b2 x/2)⁻²)
fn misra_b(x: &[f64], a: &[f64]) -> Option<Point> {
    let base = 1.0 + 0.5 * a[0] * x[0];
    scaled(1.0 - base.powi(-2), &[x[0] * base.powi(-3)])
}

/// exp(−b1 x)/(b2 + b3 x)
fn chwirut(x: &[f64], a: &[f64]) -> Option<Point> {
    let x = x[0];
    let below = a[1] + a[2] * x;
    let value = (-a[0] * x).exp() / below;
    value.is_finite().then(|| Point {
        offset: value,
        offset_slopes: vec![-x * value, -value / below, -x * value / below],
        basis: Vec::new(),
        basis_slopes: vec![Vec::new(); 3],
    })
}

/// b1 x^b2
fn power(x: &[f64], a: &[f64]) -> Option<Point> {
    let value = x[0].powf(a[0]);
    scaled(value, &[value * x[0].ln()])
}

/// (b1/b2) exp(−½((x − b3)/b2)²)
fn peak(x: &[f64], a: &[f64]) -> Option<Point> {
    let z = (x[0] - a[1]) / a[0];
    let value = (-0.5 * z * z).exp() / a[0];
    scaled(value, &[value * (z * z - 1.0) / a[0], value * z / a[0]])
}

/// (b1 + b2 x + b3 x² + b4 x³)/(1 + b5 x + b6 x² + b7 x³)
fn cubics(x: &[f64], a: &[f64]) -> Option<Point> {
    let x = x[0];
    let below = 1.0 + x * (a[0] + x * (a[1] + x * a[2]));
    let basis: Vec<f64> = (0..4).map(|j| x.powi(j) / below).collect();
    let slopes = (1..4).map(|k| basis.iter().map(|b| -b * x.powi(k) / below).collect()).collect();
    several(basis, slopes)
}

fn decays(x: f64, rates: &[f64], constant: bool) -> Option<Point> {
    let first = usize::from(constant);
    let values = rates.iter().map(|rate| (-rate * x).exp());
    let basis: Vec<f64> = std::iter::repeat_n(1.0, first).chain(values).collect();
    let slopes = (0..rates.len())
        .map(|k| {
            let mut slopes = vec![0.0; basis.len()];
            slopes[first + k] = -x * basis[first + k];
            slopes
        })
        .collect();
    several(basis, slopes)
}

/// b1 exp(−b2 x) + b3 exp(−b4 x) + b5 exp(−b6 x)
fn three_decays(x: &[f64], a: &[f64]) -> Option<Point> {
    decays(x[0], a, false)
}

/// b1 + b2 exp(−b4 x) + b3 exp(−b5 x)
fn two_decays(x: &[f64], a: &[f64]) -> Option<Point> {
    decays(x[0], a, true)
}

/// b1 (x² + b2 x)/(x² + b3 x + b4)
fn quadratics(x: &[f64], a: &[f64]) -> Option<Point> {
    let x = x[0];
    let below = x * x + x * a[1] + a[2];
    let value = (x * x + x * a[0]) / below;
    scaled(value, &[x / below, -x * value / below, -value / below])
}

/// b1 exp(b2/(x + b3))
fn vapour(x: &[f64], a: &[f64]) -> Option<Point> {
    let sum = x[0] + a[1];
    let value = (a[0] / sum).exp();
    scaled(value, &[value / sum, -value * a[0] / (sum * sum)])
}

/// b1 − b2 x1 exp(−b3 x2)
fn nelson(x: &[f64], a: &[f64]) -> Option<Point> {
    let value = -x[0] * (-a[0] * x[1]).exp();
    several(vec![1.0, value], vec![vec![0.0, -x[1] * value]])
}

/// b1/(1 + exp(b2 − b3 x))
fn logistic(x: &[f64], a: &[f64]) -> Option<Point> {
    let value = 1.0 / (1.0 + (a[0] - a[1] * x[0]).exp());
    let slope = value * (1.0 - value);
    scaled(value, &[-slope, x[0] * slope])
}

/// b1/(1 + exp(b2 − b3 x))^(1/b4)
fn richards(x: &[f64], a: &[f64]) -> Option<Point> {
    let grown = (a[0] - a[1] * x[0]).exp();
    let sum = 1.0 + grown;
    let value = sum.powf(-1.0 / a[2]);
    let slope = -value * grown / (a[2] * sum);
    scaled(value, &[slope, -x[0] * slope, value * sum.ln() / (a[2] * a[2])])
}
