using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.State;

/// <summary>One exchanged field: its declaration, its latest norm, its tolerance and its need.</summary>
internal sealed class FieldState(FieldDeclaration declared)
{
    /// <summary>How many converged steps the inferred tolerance looks back on.</summary>
    internal const int InferredFrom = 5;

    public FieldDeclaration Declared { get; set; } = declared;

    public string Name => Declared.Name;

    public double Weight => Declared.Weight ?? 1;

    /// <summary>Norm of the residual at the latest iteration; NaN when it was not sent then.</summary>
    public double Residual { get; private set; } = double.NaN;

    public bool Sent { get; private set; }

    /// <summary>Norm of the output as last sent in this step.</summary>
    public double? Magnitude { get; private set; }

    /// <summary>Target of the residual norm; null while it is unknown.</summary>
    public double? Tolerance { get; private set; }

    /// <summary>log10(norm / tolerance), limited to ±<see cref="Decades.Limit"/>; null while the tolerance is unknown.</summary>
    public double? Need { get; private set; }

    /// <summary>1 + the last iteration of the step with an own need above 0.</summary>
    public int Late { get; private set; }

    /// <summary>True when the tolerance is inferred from what the code accepted before.</summary>
    public bool Inferred { get; private set; }

    /// <summary>A tolerance that the run declared was known at least once.</summary>
    public bool DeclaredTolerance { get; private set; }

    private double firstResidual = double.NaN;
    private double previousStepLast = double.NaN;
    private readonly Window acceptedResiduals = new(InferredFrom);

    public void BeginStep()
    {
        if (Sent) previousStepLast = Residual;
        firstResidual = double.NaN;
        Late = 0;
        Residual = double.NaN;
        Sent = false;
        Magnitude = null;
        Tolerance = null;
        Need = null;
    }

    /// <summary>Forgets a rejected attempt: the step before it is the previous one again.</summary>
    public void ForgetAttempt() => Sent = false;

    public void Observe(IterationRecord record)
    {
        Sent = record.Residuals.TryGet(Name, out var residual);
        if (!Sent) return;
        Residual = residual;
        if (double.IsNaN(firstResidual)) firstResidual = residual;
        if (record.Magnitudes is { } magnitudes && magnitudes.TryGet(Name, out var magnitude)) Magnitude = magnitude;
        Tolerance = ToleranceOf(record);
        DeclaredTolerance |= Tolerance is not null && !Inferred;
        Need = Tolerance is { } tolerance ? Decades.Log(residual) - Decades.Log(tolerance) : null;
        if (Need > 0 || double.IsNaN(residual)) Late = record.Iteration + 1;
    }

    /// <summary>The step converged with the latest residual.</summary>
    public void Accept()
    {
        if (Sent && double.IsFinite(Residual)) acceptedResiduals.Add(Residual);
    }

    public void ForgetAccepted() => acceptedResiduals.Clear();

    private double? ToleranceOf(IterationRecord record)
    {
        Inferred = false;
        if (record.Targets is { } targets && targets.TryGet(Name, out var target) && !double.IsNaN(target)) return target;
        var absolute = Declared.Absolute ?? 0;
        if (Declared.RelativeTo == ToleranceReference.None && Declared.Absolute is not null) return absolute;
        if (Declared.Relative is not { } relative) return Declared.Absolute ?? InferredTolerance();
        return Declared.RelativeTo switch
        {
            ToleranceReference.First => Math.Max(absolute, relative * firstResidual),
            ToleranceReference.PreviousStep when !double.IsNaN(previousStepLast) => Math.Max(absolute, relative * previousStepLast),
            ToleranceReference.PreviousStep => null,
            ToleranceReference.Output when Magnitude is { } magnitude => double.IsNaN(magnitude) ? null : Math.Max(absolute, relative * magnitude),
            _ => InferredTolerance(),
        };
    }

    private double? InferredTolerance()
    {
        if (acceptedResiduals.Count == 0) return null;
        Inferred = true;
        var largest = 0.0;
        for (var i = 0; i < acceptedResiduals.Count; i++) largest = Math.Max(largest, acceptedResiduals[i]);
        return largest;
    }
}

/// <summary>Decimal logarithms that stay finite.</summary>
internal static class Decades
{
    public const double Limit = 300;

    /// <summary>log10 of a norm; −300 at and below 1e-300, 300 for an infinite or unknown one.</summary>
    public static double Log(double norm) => double.IsFinite(norm) ? Math.Log10(Math.Max(norm, 1e-300)) : Limit;
}
