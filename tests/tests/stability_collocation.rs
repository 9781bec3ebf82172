//! Growth rates against Chebyshev collocation, where its points resolve the layers.

use num_complex::Complex64;
use physics::stability::growth;
use physics::stability::layered::{Forcing, Response};
use rayon::prelude::*;
use topheavy_tests::collocation::Collocation;
use topheavy_tests::draw::Draw;
use topheavy_tests::questions::{Question, marginal, thin, wide};

const SEED: u64 = 20_260_401;
const WIDE: usize = 120;
const THIN: usize = 30;
const TOLERANCE: f64 = 1e-4;

enum Outcome {
    /// Relative difference and class.
    Compared(f64, Response),
    /// Nothing grows: the comparison is of growth.
    Decays,
    /// A layer is too thick for the points.
    Unresolved,
    Refused(String),
}

fn ask(question: &Question) -> Outcome {
    let Question { layered, omega, wavenumber: k, drive } = question;
    let first = match marginal(layered, *omega, *k) {
        Ok((marginal, searched)) => marginal.first().map_or(searched, |first| first.0),
        Err(failure) => return Outcome::Refused(failure.to_string()),
    };
    let acceleration = drive.max(1.05) * first;
    let found = match growth(layered, &Forcing { omega: *omega, acceleration }, *k, &|| false) {
        Ok(found) => found,
        Err(failure) => return Outcome::Refused(failure.to_string()),
    };
    if found.unstable == 0 {
        return Outcome::Decays;
    }
    let reach = found.harmonics as i64;
    let Some(collocation) = Collocation::new(layered, *omega, *k, reach.min(10)) else {
        return Outcome::Unresolved;
    };
    let s = Complex64::new(found.rate, found.frequency);
    match collocation.exponent(s, acceleration) {
        Some(other) => Outcome::Compared((other - s).norm() / s.norm(), found.response),
        None => Outcome::Refused(format!("no exponent near {s} of {question:?}")),
    }
}

#[test]
fn growth_rates_agree_with_chebyshev_collocation() {
    let mut draw = Draw::new(SEED);
    let mut questions: Vec<Question> = (0..WIDE).map(|number| wide(number, &mut draw)).collect();
    questions.extend((0..THIN).map(|_| thin(&mut draw)));
    let outcomes: Vec<Outcome> = questions.par_iter().map(ask).collect();
    let (mut compared, mut other, mut unresolved, mut decays, mut refused) = (0, 0, 0, 0, Vec::new());
    let mut worst: f64 = 0.0;
    for outcome in &outcomes {
        match outcome {
            Outcome::Compared(difference, response) => {
                compared += 1;
                other += usize::from(*response == Response::Other);
                worst = worst.max(*difference);
            }
            Outcome::Decays => decays += 1,
            Outcome::Unresolved => unresolved += 1,
            Outcome::Refused(why) => refused.push(why),
        }
    }
    println!(
        "seed {SEED}: {compared} compared ({other} combination), worst {worst:.1e}; {decays} decay, {unresolved} too thick"
    );
    assert!(refused.is_empty(), "{refused:#?}");
    assert!(worst < TOLERANCE, "{worst}");
    assert!(compared >= 60 && other >= 5, "{compared} compared, {other} of them combinations");
}
