//! What the meter readings say about the home.

use super::{Drawn, Material, drawn};
use crate::chart::{ChartError, MeterPoint, Picture, SignaturePlot, signature_plot};
use crate::locale::Marks;
use crate::signature::Signature;

/// The readings with the line that was fitted to them.
///
/// # Errors
/// When a figure cannot be drawn.
pub fn signature_picture(signature: &Signature, marks: &Marks) -> Result<Picture, ChartError> {
    let points = signature.points.iter().map(|point| MeterPoint {
        outdoor_c: point.mean_c,
        kwh_per_day: point.kwh_per_day,
        name: format!("{} to {}", point.from, point.to),
        odd: point.odd,
    });
    let heat_loss = signature.heat_loss();
    let data = SignaturePlot {
        points: points.collect(),
        base_load_kwh_per_day: signature.base_load_kwh_per_day.value,
        slope_kwh_per_k_day: signature.slope_kwh_per_k_day,
        base_temperature_c: signature.base_temperature_c.value,
        heat_loss_w_per_k: heat_loss.value,
        heat_loss_95: (heat_loss.low, heat_loss.high),
        is_effective: !signature.own_home.as_ref().is_some_and(|own| own.knows_sun),
    };
    signature_plot(&data, marks)
}

/// The picture of the readings that the brief names.
pub(super) fn signature(material: &Material<'_>) -> Result<Option<Drawn>, ChartError> {
    let Some(signature) = material.signature else {
        return Ok(None);
    };
    let picture = signature_picture(signature, &material.locale.marks)?;
    let caption = "Each point is the time between two readings of the meter. Where the line bends, heating begins. \
                   Its slope also holds how the sun goes with the cold; the heat loss is that at which the home's own model, which \
                   knows the sun where it can, uses what was metered.";
    Ok(Some(drawn("signature", caption, picture)))
}
