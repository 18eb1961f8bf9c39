//! Whatever goes into a picture, no coordinate is without a number, no label is cut
//! off, and no two labels touch.

use kinetics_core::units::TemperatureUnit;
use proptest::prelude::*;

use super::Picture;
use super::geometry::{Point, TurnedBox};
use super::grounds::Grounds;
use super::law_picture::{LawFlag, LawPicture, LawPoint, LawSample, RivalCurve};
use super::palette::Palette;
use super::samples;
use super::scene::{Item, Scene, Text};
use super::svg::svg;
use super::time_map::{FlagInterval, MeasuredRegion, TimeFlag, TimeLine, TimeMap, TimeSample};

fn visit(items: &[Item], look: &mut dyn FnMut(&Item)) {
    for item in items {
        look(item);
        if let Item::Clipped { items, .. } = item {
            visit(items, look);
        }
    }
}

fn coordinates(scene: &Scene) -> Vec<Point> {
    let mut points = Vec::new();
    visit(scene.layer.items(), &mut |item| match item {
        Item::Line { points: line, .. } | Item::Polygon { points: line, .. } => points.extend(line),
        Item::Segments { ends, .. } => points.extend(ends.iter().flatten()),
        Item::Rectangle { area, .. } | Item::Clipped { area, .. } => {
            points.push(Point::new(area.left, area.top));
            points.push(Point::new(area.right, area.bottom));
        }
        Item::Marker(marker) => points.push(marker.centre),
        Item::Text(text) => points.push(text.at),
    });
    points
}

fn texts(scene: &Scene) -> Vec<Text> {
    let mut texts = Vec::new();
    visit(scene.layer.items(), &mut |item| {
        if let Item::Text(text) = item {
            texts.push(text.clone());
        }
    });
    texts
}

fn faults(scene: &Scene) -> Vec<String> {
    let mut faults: Vec<String> = coordinates(scene)
        .iter()
        .filter(|point| !(point.x.abs() <= 1e4 && point.y.abs() <= 1e4))
        .map(|point| format!("{point:?} is no place"))
        .collect();
    let texts = texts(scene);
    let rooms: Vec<TurnedBox> = texts.iter().map(Text::room).collect();
    for (index, room) in rooms.iter().enumerate() {
        let words = &texts[index].content;
        if !room.within(scene.area()) {
            faults.push(format!("'{words}' is cut off"));
        }
        for (other, other_room) in rooms.iter().enumerate().skip(index + 1) {
            if room.overlaps(*other_room) {
                faults.push(format!("'{words}' touches '{}'", texts[other].content));
            }
        }
    }
    for palette in [Palette::light(), Palette::dark(), Palette::forced()] {
        let out = svg(scene, &palette);
        if out.contains("NaN") || out.contains("inf") {
            faults.push("the SVG holds what is no number".to_owned());
        }
    }
    faults
}

#[test]
fn labels_stay_apart_at_every_width() {
    let law = samples::law_picture(&[5.0, 25.0, 25.0, 27.0, 40.0, 105.0]);
    let map = samples::time_map();
    let mut width = 320.0;
    while width <= 1400.0 {
        for height in [220.0, 340.0, 520.0] {
            for unit in
                [TemperatureUnit::Celsius, TemperatureUnit::Kelvin, TemperatureUnit::Fahrenheit]
            {
                let law = LawPicture { temperature_unit: unit, ..law.clone() };
                let map = TimeMap { temperature_unit: unit, ..map.clone() };
                assert_eq!(faults(&law.scene(width, height)), [""; 0], "law, {width} × {height}");
                assert_eq!(faults(&map.scene(width, height)), [""; 0], "map, {width} × {height}");
            }
        }
        width += 27.0;
    }
}

#[test]
fn every_extent_is_named_where_there_is_room() {
    for width in [320.0, 560.0, 1100.0] {
        let scene = samples::time_map().scene(width, 480.0);
        let written: Vec<String> = texts(&scene).into_iter().map(|text| text.content).collect();
        for name in ["5 % gone", "2 % gone", "99 % gone", "measured"] {
            assert!(written.iter().any(|text| text == name), "{name} at {width}");
        }
    }
}

#[test]
fn empty_pictures_say_so() {
    for scene in [LawPicture::default().scene(400.0, 300.0), TimeMap::default().scene(400.0, 300.0)]
    {
        assert!(texts(&scene).iter().any(|text| text.content == "nothing measured yet"));
        assert_eq!(faults(&scene), [""; 0]);
    }
}

fn hostile() -> impl Strategy<Value = f64> {
    prop_oneof![
        4 => 250.0..400.0_f64,
        4 => -20.0..20.0_f64,
        1 => any::<f64>(),
        1 => Just(0.0),
        1 => Just(f64::NAN),
        1 => Just(f64::INFINITY),
        1 => Just(f64::NEG_INFINITY),
        1 => Just(f64::MAX),
        1 => Just(f64::MIN_POSITIVE),
    ]
}

fn some_grounds() -> impl Strategy<Value = Grounds> {
    (0..4usize).prop_map(|index| Grounds::ALL[index])
}

prop_compose! {
    fn law_points()(temperature in hostile(), ln_rate in hostile(), deviation in proptest::option::of(hostile()),
        misfit in proptest::option::of(hostile()), excluded in any::<bool>()) -> LawPoint {
        LawPoint {
            label: String::new(), temperature, ln_rate, standard_deviation: deviation,
            misfit_percent: misfit, excluded,
        }
    }
}

prop_compose! {
    fn samples_of_law()(temperature in hostile(), ln_rate in hostile(), low in hostile(), high in hostile(),
        grounds in some_grounds()) -> LawSample {
        LawSample { temperature, ln_rate, interval: Some((low, high)), grounds }
    }
}

prop_compose! {
    fn laws()(
        points in proptest::collection::vec(law_points(), 0..8),
        curve in proptest::collection::vec(samples_of_law(), 0..12),
        rival in proptest::collection::vec((hostile(), hostile()), 0..6),
        span in proptest::option::of((hostile(), hostile())),
        asked in proptest::collection::vec(hostile(), 0..5),
        rate_label in "\\PC{0,60}",
    ) -> LawPicture {
        let flags = asked.into_iter().enumerate().map(|(number, temperature)| LawFlag {
            number, temperature, label: String::new(),
        }).collect();
        LawPicture {
            rate_label, points, curve, span, flags,
            rivals: vec![RivalCurve { name: "rival".to_owned(), samples: rival }],
            temperature_unit: TemperatureUnit::Celsius,
        }
    }
}

prop_compose! {
    fn maps()(
        line in proptest::collection::vec((hostile(), hostile(), hostile(), some_grounds()), 0..12),
        asked in proptest::collection::vec((hostile(), hostile(), hostile()), 0..5),
        region in proptest::option::of(((hostile(), hostile()), proptest::option::of((hostile(), hostile())))),
    ) -> TimeMap {
        let samples = line.into_iter().map(|(temperature, time_seconds, end, grounds)| TimeSample {
            temperature, time_seconds, interval: Some((end, time_seconds)), grounds,
        }).collect();
        let flags = asked.into_iter().enumerate().map(|(number, (temperature, time_seconds, end))| TimeFlag {
            number, temperature, time_seconds, interval: Some(FlagInterval::Times(end, time_seconds)),
            grounds: None, label: String::new(),
        }).collect();
        TimeMap {
            lines: vec![TimeLine { label: "5 % gone".to_owned(), samples }],
            flags,
            measured: region.map(|(temperatures, times)| MeasuredRegion { temperatures, times }),
            temperature_unit: TemperatureUnit::Celsius,
            held_view: None,
        }
    }
}

proptest! {
    #[test]
    fn no_input_breaks_the_law_picture(law in laws(), width in 320.0..1400.0_f64, height in 200.0..700.0_f64) {
        prop_assert_eq!(faults(&law.scene(width, height)), Vec::<String>::new());
        law.table();
    }

    #[test]
    fn no_input_breaks_the_time_map(map in maps(), width in 320.0..1400.0_f64, height in 200.0..700.0_f64, x in hostile(), y in hostile()) {
        prop_assert_eq!(faults(&map.scene(width, height)), Vec::<String>::new());
        let place = map.place_at((width, height), x, y);
        prop_assert!(place.temperature.is_finite() && place.time_seconds.is_finite());
        map.flag_at((width, height), x, y);
        map.table();
    }
}
