//! A catalogue's folder read as a whole.
use std::path::Path;

use ampthrift::catalog::load;

#[test]
fn the_demo_catalogue_is_sound() {
    let loaded = load(Path::new("catalog/parts"));
    let told: Vec<String> = loaded.faults.iter().map(|fault| format!("{fault:?}\n")).collect();
    println!("{} {}", loaded.records, told.concat());
    assert_eq!(loaded.errors().count(), 0, "{}", told.concat());
    assert!(loaded.catalog.resistors.len() > 3);
}
