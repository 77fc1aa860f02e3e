//! Hazard and regulatory notes of working fluids and evaporants, as data.
//!
//! They say what to look at and defer to local codes and licensed practice; they are not a safety assessment.

use std::borrow::Cow;

use crate::model::notes::{Caution, Severity};

/// One hazard or regulatory note that belongs to a substance.
#[derive(Debug, Clone, PartialEq)]
pub struct Hazard {
    /// Stable code for programs, for example `toxic_fluid`.
    pub code: &'static str,
    /// How urgent it is.
    pub severity: Severity,
    /// A plain sentence that defers to local codes and licensed practice.
    pub text: Cow<'static, str>,
}

impl Hazard {
    /// The same as a caution of an answer.
    pub fn caution(&self) -> Caution {
        Caution {
            code: self.code,
            severity: self.severity,
            text: self.text.clone().into_owned(),
        }
    }
}

const fn note(code: &'static str, severity: Severity, text: &'static str) -> Hazard {
    Hazard {
        code,
        severity,
        text: Cow::Borrowed(text),
    }
}

const ORNAMENT: Hazard = note(
    "restricted_in_ornaments",
    Severity::Warning,
    "European Union: entry 3 of REACH Annex XVII keeps liquids classified as hazardous out of ornamental articles, \
     games and novelties; elsewhere other rules apply. Have the use cleared under local law before building, showing \
     or selling.",
);

const SEALED_GLASS: Hazard = note(
    "pressure_in_glass",
    Severity::Warning,
    "Sealed glass under changing pressure can burst. Have it designed, annealed and pressure-tested by a qualified \
     glassblower, shield it from people, and follow local pressure-equipment rules.",
);

pub(super) static DICHLOROMETHANE: [Hazard; 4] = [
    note(
        "toxic_fluid",
        Severity::Danger,
        "Dichloromethane is harmful to breathe or swallow and is suspected of causing cancer. Keep it sealed; if the \
         glass breaks, clear and air the room and follow the safety data sheet and local exposure limits.",
    ),
    note(
        "restricted_fluid",
        Severity::Warning,
        "Dichloromethane is restricted: retail sale and most uses in the USA since 2024-25 (40 CFR 751 subpart B), \
         paint stripping and other uses in the European Union. Check what local law allows before buying, shipping \
         or showing it.",
    ),
    ORNAMENT,
    SEALED_GLASS,
];

pub(super) static DIETHYL_ETHER: [Hazard; 4] = [
    note(
        "flammable_fluid",
        Severity::Danger,
        "Diethyl ether is extremely flammable; its heavy vapour travels to far-off ignition sources and is narcotic. \
         No lamp, sun or spark near it; follow local fire codes and have a licensed person approve the display.",
    ),
    note(
        "peroxide_former",
        Severity::Danger,
        "Diethyl ether forms explosive peroxides with air and light. Use stabilised stock, seal without air, and \
         leave old or opened stock to a licensed waste service.",
    ),
    ORNAMENT,
    SEALED_GLASS,
];

pub(super) static N_PENTANE: [Hazard; 3] = [
    note(
        "flammable_fluid",
        Severity::Danger,
        "Pentane is extremely flammable and its vapour is heavier than air. No lamp, sun or spark near it; follow \
         local fire codes and have a licensed person approve the display.",
    ),
    ORNAMENT,
    SEALED_GLASS,
];

pub(super) static ISOPENTANE: [Hazard; 4] = [
    note(
        "flammable_fluid",
        Severity::Danger,
        "Isopentane is extremely flammable and its vapour is heavier than air. No lamp, sun or spark near it; follow \
         local fire codes and have a licensed person approve the display.",
    ),
    note(
        "above_atmospheric",
        Severity::Danger,
        "Isopentane boils at 28 °C: in a warm room the glass stands under inner pressure. Have it designed and \
         tested for that by a qualified person under local pressure-equipment rules.",
    ),
    ORNAMENT,
    SEALED_GLASS,
];

pub(super) static ACETONE: [Hazard; 3] = [
    note(
        "flammable_fluid",
        Severity::Danger,
        "Acetone is highly flammable and irritates the eyes. No lamp, sun or spark near it; follow local fire codes \
         and have a licensed person approve the display.",
    ),
    ORNAMENT,
    SEALED_GLASS,
];

pub(super) static ETHANOL: [Hazard; 3] = [
    note(
        "flammable_fluid",
        Severity::Danger,
        "Ethanol is highly flammable. No lamp, sun or spark near it; follow local fire codes, and local excise rules \
         on undenatured alcohol.",
    ),
    ORNAMENT,
    SEALED_GLASS,
];

pub(super) static R1233ZD: [Hazard; 3] = [
    note(
        "above_atmospheric",
        Severity::Danger,
        "R-1233zd(E) boils at 18 °C: in any room the glass stands under inner pressure, about 1.8 bar absolute at 35 \
         °C. Have it designed and tested for that by a qualified person under local pressure-equipment rules.",
    ),
    note(
        "restricted_fluid",
        Severity::Warning,
        "R-1233zd(E) is a refrigerant. Handling, venting and labelling of halogenated refrigerants are regulated in \
         many places, in the European Union by Regulation (EU) 2024/573, and often need a certified person; check \
         local law.",
    ),
    note(
        "asphyxiant",
        Severity::Warning,
        "The vapour is heavier than air and displaces it. If the glass breaks, air the room; follow the safety data sheet.",
    ),
];

pub(super) static RE347MCC: [Hazard; 3] = [
    note(
        "restricted_fluid",
        Severity::Warning,
        "RE347mcc is a fluorinated ether with a high greenhouse effect. Use, venting and reporting of fluorinated \
         gases are regulated in many places, in the European Union by Regulation (EU) 2024/573; check local law.",
    ),
    note(
        "above_atmospheric",
        Severity::Warning,
        "RE347mcc boils at 34 °C: on a hot day the glass stands under inner pressure. Have it designed and tested \
         for that by a qualified person under local pressure-equipment rules.",
    ),
    SEALED_GLASS,
];

/// Notes for a fluid given by its constants: what the user declared, and the glass.
pub(super) fn declared(flammable: bool, toxic: bool, user_note: &str) -> Vec<Hazard> {
    let mut notes = vec![SEALED_GLASS];
    if flammable {
        notes.push(note(
            "flammable_fluid",
            Severity::Danger,
            "Declared flammable. No lamp, sun or spark near it; follow local fire codes and have a licensed person \
             approve the display.",
        ));
    }
    if toxic {
        notes.push(note(
            "toxic_fluid",
            Severity::Danger,
            "Declared toxic. Keep it sealed; if the glass breaks, clear and air the room and follow the safety data sheet.",
        ));
    }
    if !user_note.trim().is_empty() {
        let text = format!("Note given with the fluid: {}", user_note.trim());
        notes.push(Hazard {
            code: "fluid_note",
            severity: Severity::Info,
            text: Cow::Owned(text),
        });
    }
    notes
}
