//! One integration binary.
#[test]
fn the_library_links() {
    assert!(dipcast::model::notes::Assumption::new("a", "b", "c").what == "a");
}
