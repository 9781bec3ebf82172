//! `topheavy curve`: growth and marginal accelerations of one slab.

use crate::arguments::{Curve, Format};
use crate::{Outcome, output};
use explore::curve::{NoCurve, curve};
use quantity::{Kind, Quantity};
use std::f64::consts::TAU;

/// Most wavenumbers of one call.
const MOST: usize = 10_000;

/// Runs the command.
pub fn run(options: &Curve) -> Outcome {
    let wavenumbers = match wavenumbers(options) {
        Ok(list) => list,
        Err(reason) => return output::refuse(&reason),
    };
    let acceleration = match given(options.acceleration.as_deref(), "--acceleration") {
        Ok(value) => value,
        Err(reason) => return output::refuse(&reason),
    };
    let up_to = match given(options.up_to.as_deref(), "--up-to") {
        Ok(value) => value,
        Err(reason) => return output::refuse(&reason),
    };
    let (text, analysis) = match super::analysed(&options.file) {
        Ok(read) => read,
        Err(outcome) => return outcome,
    };
    let Some(derived) = &analysis.derived else { return super::unresolved(&options.file, &text, &analysis) };
    match curve(derived, &options.slab, &wavenumbers, acceleration, up_to, &|| false) {
        Ok(curve) => match options.format {
            Format::Json => super::print_json(&report::curve::document(&curve)),
            Format::Text => output::say(&report::curve::table(&curve)),
        },
        Err(NoCurve::StackUnresolved) => super::unresolved(&options.file, &text, &analysis),
        Err(reason) => output::refuse(&format!("{}: {}", options.file, sentence(&reason, &options.slab))),
    }
}

fn sentence(reason: &NoCurve, slab: &str) -> String {
    match reason {
        NoCurve::StackUnresolved => "the stack could not be resolved".to_owned(),
        NoCurve::NoFrequency => "no drive is written, so there is no frequency to judge at".to_owned(),
        NoCurve::SlabNotFound(names) => {
            format!("no slab has a liquid layer named \"{slab}\"; there are: {}", names.join(", "))
        }
        NoCurve::NoAcceleration => "the slab's own acceleration is not known; give --acceleration".to_owned(),
        NoCurve::Failure(failure) => failure.to_string(),
    }
}

fn wavenumbers(options: &Curve) -> Result<Vec<f64>, String> {
    let (name, text, kind) = match (&options.wavenumber, &options.wavelength) {
        (Some(text), _) => ("--wavenumber", text, Kind::Wavenumber),
        (None, Some(text)) => ("--wavelength", text, Kind::Length),
        (None, None) => return Err("give --wavenumber or --wavelength".to_owned()),
    };
    let list = quantity::parse_list(text, kind)
        .map_err(|refusal| format!("{name} \"{text}\": {}", refusal.message))?;
    if list.len() > MOST {
        return Err(format!("{name}: {} values, at most {MOST} are taken", list.len()));
    }
    let in_reach = |value: f64| (1e-3..=1e8).contains(&value);
    list.iter()
        .map(|quantity| if kind == Kind::Length { TAU / quantity.value } else { quantity.value })
        .map(|k| {
            if in_reach(k) {
                Ok(k)
            } else {
                Err(format!("{name}: {k} 1/m lies outside 0.001 1/m to 1e8 1/m"))
            }
        })
        .collect()
}

/// An acceleration of the command line; without an amplitude word it is a peak value, as everything printed here.
fn given(text: Option<&str>, name: &str) -> Result<Option<f64>, String> {
    let Some(text) = text else { return Ok(None) };
    let stated = |quantity: Quantity| quantity.peak();
    let value = match quantity::parse(text, Kind::VibrationAcceleration) {
        Ok(quantity) => stated(quantity),
        Err(refusal) => match quantity::parse(text, Kind::SteadyAcceleration) {
            Ok(quantity) => quantity.value,
            Err(_) => return Err(format!("{name} \"{text}\": {}", refusal.message)),
        },
    };
    match (0.0..=1e7).contains(&value) {
        true => Ok(Some(value)),
        false => Err(format!("{name} \"{text}\": must lie between 0 and 1e7 m/s²")),
    }
}
