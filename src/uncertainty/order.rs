//! The orders of hydrographic survey that a depth is good enough for.

use serde::Serialize;

/// An order of IHO S-44 and whether the depth meets it.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
pub struct SurveyOrder {
    /// Name of the order.
    pub order: &'static str,
    /// Maximum total vertical uncertainty at this depth in m (95 %).
    pub limit_m: f64,
    /// Whether the expanded uncertainty (95 %) keeps to it.
    pub met: bool,
}

/// `(order, a in m, b)` of IHO S-44, edition 6.0.0 (2020), table 1.
const ORDERS: [(&str, f64, f64); 5] = [
    ("exclusive", 0.15, 0.0075),
    ("special", 0.25, 0.0075),
    ("1a", 0.5, 0.013),
    ("1b", 0.5, 0.013),
    ("2", 1.0, 0.023),
];

/// The orders at `depth_m`, against an expanded uncertainty of 95 %: `TVU = sqrt(a^2 + (b d)^2)` (IHO S-44, section 3.2.2).
pub fn survey_orders(depth_m: f64, expanded_95_m: f64) -> Vec<SurveyOrder> {
    ORDERS
        .iter()
        .map(|&(order, a, b)| {
            let limit_m = a.hypot(b * depth_m);
            SurveyOrder { order, limit_m, met: expanded_95_m <= limit_m }
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn limits_at_hand_computed_depths() {
        // 1a at 40 m: sqrt(0.25 + 0.2704) = 0.7214; special at 0 m is a itself.
        let orders = survey_orders(40.0, 0.7);
        assert!((orders[2].limit_m - 0.721_4).abs() < 5e-5);
        assert!(orders[2].met && !orders[0].met);
        assert_eq!(survey_orders(0.0, 0.2)[1].limit_m, 0.25);
    }
}
