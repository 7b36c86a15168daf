using CouplingWatch.Records;

namespace CoupledRuns;

/// <summary>Norms of one pass against the tolerance of the field: ‖r‖ ≤ max(absolute, relative · ‖x̃‖).</summary>
/// <param name="Residual">‖r‖.</param>
/// <param name="Output">‖x̃‖.</param>
/// <param name="Field">The field, with its tolerances.</param>
internal readonly record struct PassNorms(double Residual, double Output, FieldDeclaration Field)
{
    public double Target => Math.Max(Field.Absolute ?? 0, (Field.Relative ?? 0) * Output);

    /// <summary>False when a norm is NaN or infinite.</summary>
    public bool Finite => double.IsFinite(Residual) && double.IsFinite(Output);

    public bool Met => Finite && Residual <= Target;
}
