//! The fields of the drive: what moves, what holds it up, and the travel table of a link drive.

use calc::decimal;
use calc::limits;
use calc::prediction::{Lift, TravelEntry, kinematics_of};
use calc::press::{DriveKind, Press};
use calc::refusal::Refusal;
use calc::units::{Angle, Area, Force, Inertia, Length, Mass, Pressure, Torque};

use super::edit;
use crate::window::context::SheetContext;
use crate::window::sheets::form::Form;
use crate::window::widgets::{FieldKind, caption, heading};
use crate::window::wishes::Wishes;

/// The kinds of counterbalance that a form offers.
#[derive(Clone, Copy, PartialEq)]
enum LiftChoice {
    NotStated,
    None,
    Force,
    Cylinders,
}

const fn lift_words(choice: LiftChoice) -> &'static str {
    match choice {
        LiftChoice::NotStated => "not stated",
        LiftChoice::None => "none",
        LiftChoice::Force => "known as a force",
        LiftChoice::Cylinders => "cylinders under pressure",
    }
}

/// Draws the fields.
pub fn drive_ui(ui: &mut egui::Ui, cx: &SheetContext, form: &mut Form<'_>, wishes: &mut Wishes) {
    let press = cx.press;
    let data = press.prediction.clone().unwrap_or_default();
    heading(ui, "Drive");
    caption(ui, kinematics_words(press));
    if press.drive == DriveKind::Link {
        travel_ui(ui, press, form, &data.travel, wishes);
    }
    let slide = data.slide_mass.map(Mass::base);
    if let Some(mass) = form.number(ui, "slide", "Slide mass, without die", &limits::SLIDE_MASS, slide) {
        edit(wishes, press, "change slide mass", move |data| data.slide_mass = mass.map(Mass::from_base));
    }
    let inertia = data.inertia.map(Inertia::base);
    if let Some(count) = form.number(ui, "inertia", "Inertia at the crank", &limits::INERTIA, inertia) {
        edit(wishes, press, "change inertia", move |data| data.inertia = count.map(Inertia::from_base));
    }
    let friction = data.friction.map(Torque::base);
    if let Some(count) = form.number(ui, "friction", "Running friction", &limits::FRICTION_TORQUE, friction) {
        edit(wishes, press, "change running friction", move |data| data.friction = count.map(Torque::from_base));
    }
    caption(
        ui,
        "Inertia: crank, gears and driven clutch parts, reduced to the crank. Friction: 0 is the cautious side.",
    );
    lift_ui(ui, press, form, data.counterbalance, wishes);
}

fn lift_ui(ui: &mut egui::Ui, press: &Press, form: &mut Form<'_>, lift: Lift, wishes: &mut Wishes) {
    heading(ui, "Counterbalance");
    let shown = match lift {
        Lift::NotStated => LiftChoice::NotStated,
        Lift::None => LiftChoice::None,
        Lift::Force(_) => LiftChoice::Force,
        Lift::Cylinders { .. } => LiftChoice::Cylinders,
    };
    let all = [LiftChoice::NotStated, LiftChoice::None, LiftChoice::Force, LiftChoice::Cylinders];
    if let Some(choice) = form.choice(ui, "lift", "Kind", (Some(shown), &all), lift_words) {
        edit(wishes, press, "change counterbalance", move |data| {
            data.counterbalance = match choice {
                LiftChoice::NotStated => Lift::NotStated,
                LiftChoice::None => Lift::None,
                LiftChoice::Force => Lift::Force(None),
                LiftChoice::Cylinders => Lift::Cylinders { pressure: None, area: None },
            }
        });
    }
    match lift {
        Lift::NotStated | Lift::None => {}
        Lift::Force(force) => {
            let force = force.map(Force::base);
            let limit = &limits::COUNTERBALANCE_FORCE;
            if let Some(count) = form.number(ui, "lift-force", "Upward force", limit, force) {
                edit(wishes, press, "change counterbalance force", move |data| {
                    data.counterbalance = Lift::Force(count.map(Force::from_base))
                });
            }
        }
        Lift::Cylinders { pressure, area } => {
            let count = pressure.map(Pressure::base);
            if let Some(count) = form.number(ui, "lift-pressure", "Pressure", &limits::COUNTERBALANCE, count) {
                let pressure = count.map(Pressure::from_base);
                edit(wishes, press, "change counterbalance pressure", move |data| {
                    data.counterbalance = Lift::Cylinders { pressure, area }
                });
            }
            let count = area.map(Area::base);
            if let Some(count) = form.number(ui, "lift-area", "Piston area, all", &limits::PISTON_AREA, count) {
                let area = count.map(Area::from_base);
                edit(wishes, press, "change counterbalance area", move |data| {
                    data.counterbalance = Lift::Cylinders { pressure, area }
                });
            }
            caption(ui, "A stop test that states its counterbalance pressure is fitted with that one.");
        }
    }
}

fn kinematics_words(press: &Press) -> String {
    match (press.drive, press.stroke, press.rod) {
        (DriveKind::Crank, Some(stroke), Some(rod)) => match kinematics_of(press) {
            Ok(_) => format!("Crank, stroke {stroke}, connecting rod {rod}, from the sheet Press."),
            Err(refusal) => refusal.to_string(),
        },
        (DriveKind::Crank, ..) => "Enter stroke and connecting rod on the sheet Press.".into(),
        (DriveKind::Link, ..) => match kinematics_of(press) {
            Ok(_) => "Link drive, by its travel table.".into(),
            Err(refusal) => format!("Link drive. {refusal}"),
        },
    }
}

/// The travel table as one text: angle and travel in pairs, parted by semicolons, as it is pasted from a sheet of two columns.
fn travel_ui(ui: &mut egui::Ui, press: &Press, form: &mut Form<'_>, travel: &[TravelEntry], wishes: &mut Wishes) {
    let rows: Vec<String> =
        travel.iter().map(|row| format!("{} {}", row.angle.digits(), row.travel.digits())).collect();
    let taken = rows.join("; ");
    let kind = FieldKind::words("Travel table").wide(super::FIELD).hint("0 0; 15 4.2; 30 16.1; ...");
    if let Some(rows) = form.optional(ui, "travel", kind, &taken, read_travel) {
        edit(wishes, press, "change travel table", move |data| data.travel = rows.unwrap_or_default());
    }
    caption(
        ui,
        "Crank angle in ° and slide travel in mm below top dead centre, at least 24 pairs parted by semicolons.",
    );
}

/// Reads pairs of angle and travel; rows are parted by semicolons or line ends, the two figures by spaces or tabs.
fn read_travel(text: &str) -> Result<Vec<TravelEntry>, Refusal> {
    let mut rows = Vec::new();
    for row in text.split([';', '\n', '\r']).map(str::trim).filter(|row| !row.is_empty()) {
        let figures: Vec<&str> = row.split_whitespace().collect();
        let [angle, travel] = figures[..] else {
            let allowed = "two figures: angle in ° and travel in mm";
            return Err(Refusal::new(
                "A row of the travel table",
                row,
                allowed,
                "Part them by a space, the rows by semicolons.",
            ));
        };
        let take = |text: &str, limit: &limits::Limit| {
            decimal::thousandths(text).map_err(|why| limit.unreadable(text, why)).and_then(|count| limit.take(count))
        };
        rows.push(TravelEntry {
            angle: Angle::from_base(take(angle, &limits::ANGLE)?),
            travel: Length::from_base(take(travel, &limits::TRAVEL)?),
        });
    }
    Ok(rows)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_travel_table_is_read_as_it_is_pasted() {
        let rows = read_travel("0 0; 15\t4,2\n30 16.1").unwrap();
        assert_eq!(rows.len(), 3);
        assert_eq!((rows[1].angle, rows[1].travel), (Angle::deg(15), Length::from_base(4200)));
        assert!(read_travel("0 0 0").unwrap_err().to_string().contains("two figures"));
        assert!(read_travel("0 0; 400 3").unwrap_err().to_string().starts_with("Crank angle is 400"));
    }
}
