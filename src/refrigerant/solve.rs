//! A Newton iteration that cannot leave its bracket.

/// Steps after which a bracketed Newton iteration gives up. Pure bisection would need about 45 steps
/// to narrow a bracket to 1e-13 of its width, so this cap is reached only when the function is broken.
const MAX_STEPS: usize = 80;

/// Root of an increasing function between `low` and `high`, or `None` when it is not reached.
///
/// `function` gives value and slope. A Newton step that would leave the bracket, or that starts from a
/// slope that is not positive, is replaced by halving the bracket. The iteration ends when a Newton
/// step is shorter than `tolerance` times the present point, and that step is still taken.
pub(super) fn increasing_root(
    (mut low, mut high): (f64, f64),
    start: f64,
    tolerance: f64,
    mut function: impl FnMut(f64) -> Option<(f64, f64)>,
) -> Option<f64> {
    // `clamp` would panic on an empty bracket or one that is not a number
    if low > high || low.is_nan() || high.is_nan() {
        return None;
    }
    let mut point = start.clamp(low, high);
    for _ in 0..MAX_STEPS {
        let (value, slope) = function(point)?;
        if !value.is_finite() {
            return None;
        }
        let next = point - value / slope;
        // before the bracket test: at the root rounding may put the last step just outside the bracket
        if slope > 0.0 && (next - point).abs() <= tolerance * point.abs() {
            return Some(next);
        }
        if value > 0.0 {
            high = point;
        } else {
            low = point;
        }
        point = if slope > 0.0 && next > low && next < high {
            next
        } else {
            0.5 * (low + high)
        };
    }
    None
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn finds_roots_that_newton_alone_would_lose() {
        // atan: plain Newton diverges from |x| > 1.39
        let root = increasing_root((-5.0, 90.0), 80.0, 1e-12, |x| {
            Some(((x - 1.0).atan(), 1.0 / (1.0 + (x - 1.0).powi(2))))
        });
        assert!((root.unwrap() - 1.0).abs() < 1e-12);
    }

    #[test]
    fn says_so_when_there_is_none() {
        assert_eq!(
            increasing_root((0.0, 1.0), 0.5, 1e-12, |_| Some((f64::NAN, 1.0))),
            None
        );
        assert_eq!(
            increasing_root((0.0, 1.0), 0.5, 1e-12, |_| Some((1.0, 0.0))),
            None
        );
    }
}
