using CouplingWatch.Monitoring.State;

namespace CouplingWatch.Monitoring.Basis;

/// <summary>How the fields of a group lie in the stacked vector and how the code's least squares weighs them.</summary>
/// <param name="Lack">Why the vectors cannot be used; null when they can.</param>
/// <param name="Send">What to send instead.</param>
/// <param name="Stretches">Weight and length of each field's stretch; null when all weigh the same.</param>
internal sealed record Stacking(string? Lack, string Send, IReadOnlyList<(double Weight, int Length)>? Stretches)
{
    private static readonly Stacking AsItIs = new(null, "", null);

    /// <param name="length">Of the stacked vector; null for a sketch, which cannot be weighted any more.</param>
    public static Stacking Of(FieldBook fields, string? group, int? length)
    {
        var members = 0;
        FieldState? first = null;
        bool unitsDiffer = false, weightsMissing = false, weightsDiffer = false;
        var known = 0;
        FieldState? unsized = null;
        for (var i = 0; i < fields.Unknowns.Count; i++)
        {
            var field = fields.Unknowns[i];
            if (group is not null && field.Declared.Group != group) continue;
            members++;
            first ??= field;
            unitsDiffer |= !string.Equals(field.Declared.Unit, first.Declared.Unit, StringComparison.Ordinal);
            weightsMissing |= field.Declared.Weight is null;
            weightsDiffer |= field.Weight != first.Weight;
            known += field.Declared.Size ?? 0;
            if (field.Declared.Size is null) unsized = unsized is null ? field : null;
        }
        if (unitsDiffer && weightsMissing) return new Stacking("fields of different units are stacked without weights", "weights: the multiplier of each field in the code's own least squares", null);
        if (members < 2 || !weightsDiffer) return AsItIs;
        if (length is not { } rows) return new Stacking("a sketch of several fields cannot be weighted afterwards", "full vectors, or one group a field", null);
        if (unsized is null ? known != rows : known >= rows) return new Stacking("the sizes of the stacked fields do not add up to the vector", "the size of each field in open", null);
        var stretches = new List<(double, int)>(members);
        for (var i = 0; i < fields.Unknowns.Count; i++)
        {
            var field = fields.Unknowns[i];
            if (group is not null && field.Declared.Group != group) continue;
            if (field.Declared.Size is null && field != unsized) return new Stacking("the sizes of the stacked fields are not known", "the size of each field in open", null);
            stretches.Add((field.Weight, field.Declared.Size ?? rows - known));
        }
        return new Stacking(null, "", stretches);
    }
}
