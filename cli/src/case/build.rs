//! The mirror of the file -> the checked case.

use std::ops::Range;
use std::path::Path;
use std::sync::Arc;

use mesher::section::{Section, SpaceEdge};
use solver::problem::{Mover, Problem};

use super::expression::{Dimension, unit};
use super::fault::{Fault, Faults, Place};
use super::givens::Givens;
use super::materials::Materials;
use super::model::CaseFile;
use super::model::located::Located;
use super::model::winding::MoverKeys;
use super::nearest::known_names_help;
use super::regions::{self, ReadRegion};
use super::roster::Roster;
use super::source::{Source, SourceText};
use super::values::Values;
use super::{
    Case, LengthUnit, Linkage, Places, RegionNote, Travel, later, readings, resolved, space, syntax, travel,
    windings,
};

/// Temperature of a case that says none, °C.
const USUAL_TEMPERATURE_C: f64 = 20.0;

/// Reads a case from its source.
pub(super) fn read(source: &Source, sets: &[String]) -> Result<Case, Faults> {
    let text = source.read()?;
    let (file, mut faults) = syntax::parse(&text).map_err(sorted)?;
    let length_unit = length_unit(&file, &text, &mut faults);
    let givens = Givens::resolve(&file.given, sets, &text, &mut faults);
    let mut values = Values::new(text.clone(), givens, length_unit, faults);
    let built = build(&file, &source.folder(), &mut values);
    let parts = match built {
        Some(parts) if values.faults.is_empty() => parts,
        _ => return Err(sorted(values.faults)),
    };
    let resolved_toml = resolved::write(&text, &values);
    Ok(Case {
        name: source.stem(),
        title: file.title.map_or_else(|| source.stem(), |title| title.value),
        length_unit: values.length_unit,
        temperature_c: parts.temperature_c,
        givens: values.givens.report(),
        section: parts.section,
        problem: parts.problem,
        region_notes: parts.notes,
        travel: parts.travel,
        linkage: parts.linkage,
        accuracy: parts.accuracy,
        cautions: values.cautions,
        resolved_toml,
        places: parts.places,
    })
}

/// Faults in the order of the text, each once.
fn sorted(mut faults: Vec<Fault>) -> Faults {
    if faults.is_empty() {
        // Every part that could not be built noted why; this line is for a mistake of ours.
        faults.push(Fault::unplaced(
            "the case cannot be read, for a reason that this program failed to note",
        ));
    }
    faults.sort_by_cached_key(|fault| {
        fault
            .place
            .as_ref()
            .map(|place| (place.source.name.clone(), place.span.start))
    });
    faults.dedup();
    Faults { list: faults }
}

/// What a case is made of.
struct Parts {
    temperature_c: f64,
    section: Section,
    problem: Problem,
    notes: Vec<RegionNote>,
    travel: Option<Travel>,
    linkage: Option<Linkage>,
    accuracy: solver::solve::Settings,
    places: Places,
}

fn build(file: &CaseFile, folder: &Path, values: &mut Values) -> Option<Parts> {
    let temperature_c = match &file.temperature {
        Some(temperature) => values.temperature_c(temperature, "temperature"),
        None => Some(USUAL_TEMPERATURE_C),
    };
    let materials = Materials::read(&file.stock, folder, values);
    let region_roster = Roster::new(
        "region",
        file.region.iter().map(|region| &region.value.name),
        values,
    );
    let winding_roster = Roster::new(
        "winding",
        file.winding.iter().map(|winding| &winding.value.name),
        values,
    );
    if file.region.is_empty() {
        let end = values.place(&(0..0));
        values.faults.push(Fault::new(
            "the case draws nothing: it needs at least one [[region]]",
            end,
        ));
    }
    // Where the temperature is wrong, the rest is read at the usual one to find its faults too.
    let at_c = temperature_c.unwrap_or(USUAL_TEMPERATURE_C);
    let regions: Vec<Option<ReadRegion>> = file
        .region
        .iter()
        .map(|region| regions::read(region, &materials, at_c, values))
        .collect();
    let around = windings::Surroundings {
        roster: &region_roster,
        regions: &regions,
        materials: &materials,
        temperature_c: at_c,
    };
    let windings: Vec<_> = file
        .winding
        .iter()
        .map(|keys| windings::read(keys, &around, values))
        .collect();
    check_sides(file, &region_roster, values);
    let movers = movers(&file.mover, &region_roster, values);
    later::other_regimes(file, values);
    let linkage = travel::linkage(file, &winding_roster, values);
    check_vary(file, values);
    let space = space::read(&file.space.clone().unwrap_or_default(), values);
    if let Some(mirror_z_m) = space.as_ref().and_then(|space| space.mirror_z_m) {
        space::check_above_mirror(&regions, mirror_z_m, values);
    }
    let around = travel::Around {
        regions: &regions,
        space: space.as_ref(),
    };
    let travel = travel::travel(file, &movers, &around, values);
    let ambient_b_t = space::ambient(file, values);
    let walled = matches!(
        space,
        Some(space::ReadSpace {
            edge: SpaceEdge::Wall(_),
            ..
        })
    );
    let stray = readings::stray(file, walled, values);
    Roster::new(
        "traverse",
        file.traverse.iter().map(|traverse| &traverse.value.name),
        values,
    );
    let traverses: Vec<_> = file
        .traverse
        .iter()
        .map(|keys| readings::traverse(keys, values))
        .collect();
    Roster::new(
        "search coil",
        file.search_coil.iter().map(|coil| &coil.value.name),
        values,
    );
    let search_coils: Vec<_> = file
        .search_coil
        .iter()
        .map(|keys| readings::search_coil(keys, values))
        .collect();
    let accuracy = readings::accuracy(file.accuracy.as_ref(), values);

    let places = Places::new(values.source(), file, &regions);
    let (space, windings) = (space?, all(windings)?);
    let (painted, mut physics, mut notes) = taken_apart(all(regions)?);
    for (index, winding) in windings.iter().enumerate() {
        for &side in &winding.regions {
            // Of a coil side the material gives only the magnetic law: its turns are the winding's own.
            physics[side].conductivity_s_per_m = 0.0;
            physics[side].density_kg_per_m3 = None;
            notes[side].winding = Some(index);
        }
    }
    Some(Parts {
        temperature_c: temperature_c?,
        section: Section {
            regions: painted,
            edge: space.edge,
            mirror_z_m: space.mirror_z_m,
        },
        problem: Problem {
            regions: physics,
            windings,
            movers,
            mirror: space.mirror,
            ambient_b_t: ambient_b_t?,
            traverses: all(traverses)?,
            search_coils: all(search_coils)?,
            stray: stray?,
        },
        notes,
        travel: travel?,
        linkage: linkage?,
        accuracy: accuracy?,
        places,
    })
}

/// All of them, or nothing if one is missing.
fn all<T>(parts: Vec<Option<T>>) -> Option<Vec<T>> {
    parts.into_iter().collect()
}

type Apart = (
    Vec<mesher::section::PaintedRegion>,
    Vec<solver::problem::RegionPhysics>,
    Vec<RegionNote>,
);

fn taken_apart(regions: Vec<ReadRegion>) -> Apart {
    let mut apart: Apart = (Vec::new(), Vec::new(), Vec::new());
    for region in regions {
        apart.0.push(region.painted);
        apart.1.push(region.physics);
        apart.2.push(RegionNote {
            material: region.material,
            winding: None,
        });
    }
    apart
}

/// A region is a coil side of one winding only.
fn check_sides(file: &CaseFile, roster: &Roster, values: &mut Values) {
    let lists = file
        .winding
        .iter()
        .map(|keys| (&keys.value.name, &keys.value.regions));
    check_owned_once(lists, roster, "winding", values);
}

/// A region belongs to at most one owner (winding or mover).
fn check_owned_once<'a>(
    lists: impl Iterator<Item = (&'a Located<String>, &'a Located<Vec<Located<String>>>)>,
    roster: &Roster,
    kind: &str,
    values: &mut Values,
) {
    let mut owner: std::collections::HashMap<usize, &str> = std::collections::HashMap::new();
    for (name, regions) in lists {
        for region in &regions.value {
            let Some(index) = roster.index(&region.value) else {
                continue;
            };
            match owner.get(&index) {
                Some(first) if *first != name.value => {
                    let message = format!(
                        "region `{}` belongs to two {kind}s: `{first}` and `{}`",
                        region.value, name.value
                    );
                    values.fault(&region.span, message);
                }
                Some(_) => {}
                None => {
                    owner.insert(index, &name.value);
                }
            }
        }
    }
}

fn movers(keys: &[Located<MoverKeys>], roster: &Roster, values: &mut Values) -> Vec<Mover> {
    Roster::new("mover", keys.iter().map(|mover| &mover.value.name), values);
    let lists = keys.iter().map(|mover| (&mover.value.name, &mover.value.regions));
    check_owned_once(lists, roster, "mover", values);
    keys.iter()
        .map(|mover| Mover {
            name: mover.value.name.value.clone(),
            regions: roster.find_all(&mover.value.regions, values),
        })
        .collect()
}

/// `[[vary]]` is for sweeps; here only its names are checked.
fn check_vary(file: &CaseFile, values: &mut Values) {
    for vary in &file.vary {
        let name = &vary.value.name;
        if !values.givens.names().any(|given| given == name.value) {
            let help = known_names_help(&name.value, values.givens.names(), "givens");
            values.fault_with_help(
                &name.span,
                format!("there is no given `{}` to vary", name.value),
                help,
            );
        }
    }
}

fn length_unit(file: &CaseFile, text: &Arc<SourceText>, faults: &mut Vec<Fault>) -> LengthUnit {
    let usual = LengthUnit {
        name: "mm".to_owned(),
        metres: 1e-3,
    };
    let Some(Located { value: name, span }) = &file.length_unit else {
        return usual;
    };
    match unit::find(name) {
        Some(found) if found.dimension == Dimension::LENGTH => LengthUnit {
            name: name.clone(),
            metres: found.factor,
        },
        found => {
            let what = if found.is_some() {
                "not a unit of length"
            } else {
                "not a unit"
            };
            let span: Range<usize> = span.clone();
            faults.push(
                Fault::new(
                    format!("`{name}` is {what}"),
                    Place {
                        source: text.clone(),
                        span,
                    },
                )
                .with_help(known_names_help(
                    name,
                    ["m", "cm", "mm", "um", "in", "mil"],
                    "units of length",
                )),
            );
            usual
        }
    }
}
