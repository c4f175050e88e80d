/// Asserts that `actual` equals `expected` within a relative tolerance.
#[track_caller]
pub(crate) fn assert_close(actual: f64, expected: f64, relative: f64) {
    let bound = relative * expected.abs();
    assert!(
        (actual - expected).abs() <= bound,
        "{actual} is not {expected} within {relative:e} relative"
    );
}

/// Asserts that `actual` equals `expected` within an absolute tolerance, for values printed with few decimals.
#[track_caller]
pub(crate) fn assert_within(actual: f64, expected: f64, absolute: f64) {
    assert!((actual - expected).abs() <= absolute, "{actual} is not {expected} within {absolute}");
}
