//! The pictures of an invented study, compared with drawings kept beside this file.
//! `UPDATE_GOLDEN=1 cargo test -p web golden` writes them anew; look at them before committing.

#![allow(clippy::unwrap_used)]

use std::fs;
use std::path::PathBuf;

use super::Picture;
use super::law_picture::LawPicture;
use super::palette::Palette;
use super::samples;
use super::svg::svg;
use super::time_map::TimeMap;

fn compare(name: &str, picture: &dyn Picture, (width, height): (f64, f64), palette: Palette) {
    let path = PathBuf::from(env!("CARGO_MANIFEST_DIR"))
        .join("src/figure/golden")
        .join(format!("{name}.svg"));
    let drawn = svg(&picture.scene(width, height), &palette);
    if std::env::var_os("UPDATE_GOLDEN").is_some() {
        fs::write(&path, &drawn).unwrap();
    }
    let kept = fs::read_to_string(&path).unwrap_or_default();
    assert!(
        drawn == kept,
        "{name}.svg differs from the drawing kept; UPDATE_GOLDEN=1 writes it anew"
    );
}

#[test]
fn golden_law_pictures() {
    let picture = samples::law_picture(&[25.0, 40.0, 87.0]);
    compare("law_560_light", &picture, (560.0, 400.0), Palette::light());
    compare("law_560_dark", &picture, (560.0, 400.0), Palette::dark());
    compare("law_1100", &picture, (1100.0, 520.0), Palette::light());
    let mut crowded = samples::law_picture(&[5.0, 25.0, 25.0, 27.0, 40.0, 105.0]);
    crowded.points[3].excluded = true;
    compare("law_360", &crowded, (360.0, 340.0), Palette::light());
    let scattered = samples::scattered_law_picture();
    compare("law_scattered", &scattered, (560.0, 400.0), Palette::light());
    compare("law_empty", &LawPicture::default(), (560.0, 300.0), Palette::light());
}

#[test]
fn golden_time_maps() {
    let map = samples::time_map();
    compare("time_560_light", &map, (560.0, 480.0), Palette::light());
    compare("time_560_dark", &map, (560.0, 480.0), Palette::dark());
    compare("time_1100", &map, (1100.0, 560.0), Palette::light());
    compare("time_360", &map, (360.0, 400.0), Palette::light());
    let scattered = samples::scattered_time_map();
    compare("time_scattered", &scattered, (560.0, 480.0), Palette::light());
    compare("time_empty", &TimeMap::default(), (560.0, 300.0), Palette::light());
}
