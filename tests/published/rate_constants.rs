//! Published tables of rate constants at several temperatures, pasted and evaluated as a user
//! would.
//!
//! "Recomputed" values are an ordinary least-squares line of ln k on 1/T over the published
//! table with R = 8.314462618 J/(mol K), computed independently of this code; they are met to
//! 1e-9 or to the digits given. Printed values are met to their last digit or to the slip that
//! is named.

use checks::{checks, close, found, paste, remark_codes};
use kinetics_core::study::{Findings, LawFindings};
use serde_json::json;

/// Barnard, Cocks & Lee, J. Chem. Soc. Faraday Trans. 1, 1974, 70, 1782: cyclopropane to
/// propene, k in 1/s.
const CYCLOPROPANE: [(f64, f64); 32] = [
    (950.0, 4.43),
    (960.0, 8.07),
    (986.0, 19.6),
    (1003.0, 29.8),
    (1010.0, 35.9),
    (1012.0, 29.7),
    (1019.0, 56.4),
    (1024.0, 59.5),
    (1028.0, 87.1),
    (1052.0, 135.0),
    (1062.0, 114.0),
    (1068.0, 174.0),
    (1072.0, 189.0),
    (1077.0, 197.0),
    (1096.0, 873.0),
    (1188.0, 930.0),
    (1203.0, 1920.0),
    (1221.0, 1870.0),
    (1222.0, 2000.0),
    (1230.0, 2890.0),
    (1302.0, 2160.0),
    (1375.0, 4660.0),
    (1393.0, 7890.0),
    (1393.0, 5090.0),
    (1403.0, 7280.0),
    (1428.0, 5330.0),
    (1429.0, 7420.0),
    (1452.0, 5960.0),
    (1474.0, 10700.0),
    (1516.0, 16900.0),
    (1565.0, 15500.0),
    (1653.0, 23400.0),
];

fn cyclopropane(points: usize) -> Findings {
    let (t, k): (Vec<f64>, Vec<f64>) = CYCLOPROPANE[..points].iter().copied().unzip();
    found(&paste("s⁻¹", &t, &k), json!({}))
}

fn law(findings: &Findings) -> &LawFindings {
    findings.law.as_ref().unwrap()
}

fn kilojoules(findings: &Findings) -> f64 {
    law(findings).activation_energy.value / 1000.0
}

checks! {
    /// The published pair, 266 kJ/mol and 2.04e15 1/s, is the line through all 15 points.
    fn cyclopropane_published_line() {
        let findings = cyclopropane(15);
        close(kilojoules(&findings), 265.754, 2e-6);
        close(law(&findings).pre_exponential_factor.value, 2.0424e15, 2e-5);
        close(kilojoules(&findings), 265.75443984162615, 1e-9);
        close(law(&findings).activation_energy.standard_error.unwrap(), 15179.468451063793, 1e-9);
        // 95 % limits: Student t with 13 degrees of freedom, to what the quantile keeps.
        close(law(&findings).activation_energy.low.unwrap(), 232961.19197818214, 1e-8);
        close(law(&findings).activation_energy.high.unwrap(), 298547.6877050702, 1e-8);
    }

    /// One point of the 15 moves the energy by 19 kJ/mol, and the line does not bend.
    fn cyclopropane_influence() {
        let findings = cyclopropane(15);
        let codes = remark_codes(&findings);
        assert!(codes.contains(&"influence") && !codes.contains(&"curvature"), "{codes:?}");
        let remark = findings.remarks.iter().find(|r| r.code == "influence").unwrap();
        assert!(remark.sentence.contains("1096") && remark.sentence.contains("247"), "{remark:?}");

        let text = paste(
            "1/s",
            &CYCLOPROPANE.map(|p| p.0)[..15],
            &CYCLOPROPANE.map(|p| p.1)[..15],
        );
        let without = found(
            &text,
            json!({"measured": {"excluded": [{"row": 16, "reason": "far off the others"}]}}),
        );
        close(kilojoules(&without), 246.7839303830092, 1e-9);
        assert_eq!(without.read.rows_excluded.len(), 1);
    }

    /// Over the whole range the line bends.
    fn cyclopropane_curvature() {
        let findings = cyclopropane(32);
        close(kilojoules(&findings), 148.65752386376417, 1e-9);
        assert!(remark_codes(&findings).contains(&"curvature"));
    }

    /// OpenStax, Chemistry 2e (Flowers et al. 2019), §12.5: hydrogen iodide. The book prints
    /// 180 kJ/mol because it rounds 1/T to three digits; full precision gives 185.308.
    fn hydrogen_iodide() {
        let t = [555.0, 575.0, 645.0, 700.0, 781.0];
        let k = [3.52e-7, 1.22e-6, 8.59e-5, 1.16e-3, 3.95e-2];
        let findings = found(&paste("L mol⁻¹ s⁻¹", &t, &k), json!({}));
        close(kilojoules(&findings), 185.308, 1e-6);
        close(kilojoules(&findings), 185.30785531194462, 1e-9);
        close(law(&findings).activation_energy.low.unwrap(), 178378.42625356515, 1e-8);
        close(law(&findings).activation_energy.high.unwrap(), 192237.2843703241, 1e-8);
        close(law(&findings).ln_pre_exponential_factor.standard_error.unwrap(), 0.4116604168359898, 1e-9);
        assert_eq!(findings.read.order, Some(2.0));
        assert_eq!(law(&findings).rate_unit, "L/(mol s)");
        assert_eq!(law(&findings).degrees_of_freedom, Some(3));
    }

    /// F. Daniels & E. H. Johnston, J. Am. Chem. Soc. 1921, 43, 53: N2O5, as tabulated in
    /// textbooks; the table and its 103 kJ/mol are from memory. Printed to 1 kJ/mol.
    fn dinitrogen_pentoxide() {
        let t = [273.15, 298.15, 308.15, 318.15, 328.15, 338.15];
        let k = [7.87e-7, 3.46e-5, 1.35e-4, 4.98e-4, 1.50e-3, 4.87e-3];
        let findings = found(&paste("s^-1", &t, &k), json!({}));
        close(kilojoules(&findings), 103.0, 0.5 / 103.0);
        close(kilojoules(&findings), 103.00025348751896, 1e-9);
    }

    /// P. W. Atkins & J. de Paula, Physical Chemistry: acetaldehyde from 700 to 1000 K, 188 kJ/mol and
    /// 1.1e12 L/(mol s); from memory. Printed digits; A to the 2 % of its second one.
    fn acetaldehyde() {
        let t = [700.0, 730.0, 760.0, 790.0, 810.0, 840.0, 910.0, 1000.0];
        let k = [0.011, 0.035, 0.105, 0.343, 0.789, 2.17, 20.0, 145.0];
        let findings = found(&paste("L/(mol s)", &t, &k), json!({}));
        close(kilojoules(&findings), 188.0, 0.5 / 188.0);
        close(law(&findings).pre_exponential_factor.value, 1.1e12, 0.02);
        close(kilojoules(&findings), 188.32877406770658, 1e-9);
        close(law(&findings).ln_pre_exponential_factor.value, 27.7071142294922, 1e-9);
        close(law(&findings).activation_energy.low.unwrap(), 181392.73488177065, 1e-8);
        close(law(&findings).activation_energy.high.unwrap(), 195264.8132536425, 1e-8);
    }

    /// M. Bodenstein, Z. Phys. Chem. 1899, 29, 295: hydrogen iodide, as tabulated in textbooks; the
    /// table and its 184 kJ/mol are from memory. Least squares over all nine give 185.7.
    fn hydrogen_iodide_bodenstein() {
        let t = [556.0, 575.0, 629.0, 647.0, 666.0, 683.0, 700.0, 716.0, 781.0];
        let k = [3.52e-7, 1.22e-6, 3.02e-5, 8.59e-5, 2.2e-4, 5.12e-4, 1.16e-3, 2.5e-3, 3.95e-2];
        let findings = found(&paste("L mol⁻¹ s⁻¹", &t, &k), json!({}));
        close(kilojoules(&findings), 184.0, 3.0 / 184.0);
        close(kilojoules(&findings), 185.7186990619508, 1e-9);
        close(law(&findings).activation_energy.standard_error.unwrap(), 1765.873701887133, 1e-9);
        close(law(&findings).activation_energy.low.unwrap(), 181543.07128121854, 1e-8);
        close(law(&findings).activation_energy.high.unwrap(), 189894.32684268303, 1e-8);
    }

    /// O. Levenspiel, Chemical Reaction Engineering, 3rd ed., example 2.3: milk is pasteurised in
    /// 30 min at 63 °C or 15 s at 74 °C; from memory. The book's 422 kJ/mol uses 336 and 347 K,
    /// which moves it by less than 1 kJ/mol.
    fn milk_pasteurisation_pair() {
        let text = "T/°C\tk / s⁻¹\n63\t5.555555555555556e-4\n74\t0.06666666666666667\n";
        let findings = found(text, json!({}));
        close(kilojoules(&findings), 422.0, 1.0 / 422.0);
        close(kilojoules(&findings), 422.2793292117514, 1e-9);
        assert!(law(&findings).activation_energy.low.is_none());
        assert_eq!(law(&findings).degrees_of_freedom, Some(0));
        assert!(remark_codes(&findings).contains(&"two-points"));
    }

    /// OpenStax, Chemistry 2e, §12.5: the frequency factor of C4H8 → 2 C2H4 from Ea = 261 kJ/mol
    /// and k(325 °C) = 6.1e-8 1/s, printed as 3.9e15 1/s: two digits, hence 3 %; recomputed
    /// 3.7777e15.
    fn cyclobutane_frequency_factor() {
        let findings = found("", json!({"measured": {
            "form": "known-law",
            "activation_energy": {"value": 261.0, "unit": "kJ/mol"},
            "rate_constant": {"value": 6.1e-8, "unit": "1/s"},
            "temperature": {"value": 325.0, "unit": "°C"}
        }}));
        let a = law(&findings).pre_exponential_factor.value;
        close(a, 3.9e15, 0.035);
        close(a, 3777718667272691.5, 1e-9);
        assert_eq!(law(&findings).pre_exponential_factor.low, None);
    }
}
