//! Temperatures over time, in a bounded number of points however long the duty.

/// One brake at one moment. Temperatures in K; none where they are not followed.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Sample {
    /// Bulk temperature.
    pub bulk: Option<f64>,
    /// Surface temperature.
    pub surface: Option<f64>,
    /// Friction factor.
    pub factor: f64,
}

/// All brakes at one moment.
#[derive(Debug, Clone, PartialEq)]
pub struct Moment {
    /// s, from the start.
    pub time: f64,
    /// Along the coordinate.
    pub speed: f64,
    /// Each entry.
    pub fitted: Vec<Sample>,
}

/// Moments that are kept while the duty runs, for each one asked for.
const KEPT_PER_POINT: usize = 16;

/// A course over time.
#[derive(Debug, Clone, PartialEq)]
pub struct Course {
    most: usize,
    moments: Vec<Moment>,
}

impl Course {
    pub(super) fn new(most: usize) -> Self {
        Self { most: most.max(2), moments: Vec::new() }
    }

    /// Adds a moment. When there are too many, they are thinned out by half.
    pub(super) fn add(&mut self, moment: Moment) {
        self.moments.push(moment);
        if self.moments.len() >= self.most * KEPT_PER_POINT {
            self.thin_out(self.most * KEPT_PER_POINT / 2);
        }
    }

    /// Thins the course out to what was asked for.
    pub(super) fn finish(mut self) -> Self {
        if self.moments.len() > self.most {
            self.thin_out(self.most);
        }
        self
    }

    /// Keeps both ends and, of each of several equal spans of time, the coldest and the hottest moment.
    fn thin_out(&mut self, most: usize) {
        let (Some(first), Some(last)) =
            (self.moments.first().cloned(), self.moments.last().cloned())
        else {
            return;
        };
        let spans = most.saturating_sub(2) / 2;
        let inner = self.moments.len().saturating_sub(1);
        let mut kept = vec![first.clone()];
        let mut rest = self.moments.get(1..inner).unwrap_or_default();
        for span in 1..=spans {
            let end = first.time + (last.time - first.time) * ratio(span, spans);
            let count = rest.partition_point(|moment| moment.time <= end);
            let (here, later) = rest.split_at(count);
            kept.extend(extremes(here));
            rest = later;
        }
        kept.push(last);
        self.moments = kept;
    }

    /// The moments, in the order of time.
    #[must_use]
    pub fn moments(&self) -> &[Moment] {
        &self.moments
    }
}

/// The coldest and the hottest of some moments, in the order of time.
fn extremes(moments: &[Moment]) -> Vec<Moment> {
    let by_heat = |one: &(usize, &Moment), other: &(usize, &Moment)| {
        hottest(one.1).total_cmp(&hottest(other.1))
    };
    let coldest = moments.iter().enumerate().min_by(by_heat);
    let hottest = moments.iter().enumerate().max_by(by_heat);
    match (coldest, hottest) {
        (Some(one), Some(other)) if one.0 < other.0 => vec![one.1.clone(), other.1.clone()],
        (Some(one), Some(other)) if one.0 > other.0 => vec![other.1.clone(), one.1.clone()],
        (one, _) => one.map(|(_, moment)| moment.clone()).into_iter().collect(),
    }
}

fn hottest(moment: &Moment) -> f64 {
    moment.fitted.iter().filter_map(|sample| sample.surface).fold(0.0, f64::max)
}

#[expect(clippy::cast_precision_loss, reason = "counts of points stay far below 2^53")]
const fn ratio(part: usize, whole: usize) -> f64 {
    part as f64 / whole as f64
}
