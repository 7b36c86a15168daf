using CouplingWatch.Coupling.QuasiNewton;
using CouplingWatch.Coupling.Relaxation;
using CouplingWatch.Coupling.Surrogates;

namespace CouplingWatch.Coupling;

/// <summary>
/// The step-wise driver of all methods of this library. It keeps the secant columns whatever the method, so a change of method,
/// history or filter between steps finds the columns of earlier steps in place.
/// </summary>
/// <remarks>Cost of an update O(N·k) for k columns kept. Memory 2·N·k. A step has to be begun before and ended after its updates.</remarks>
public sealed class SteppedCoupling : ICouplingMethod
{
    private readonly SecantHistory history;
    private readonly ISurrogate? surrogate;
    private readonly double[] previous;
    private double aitken;
    private int updates;
    private bool inStep;

    /// <param name="size">Length N of the interface vector, 1 or more.</param>
    /// <param name="settings">Settings in force at first.</param>
    /// <param name="historyCapacity">Closed steps whose columns are kept at most, so that the history can be raised later; 0 or more.</param>
    /// <param name="surrogate">What <see cref="MethodKind.IqnIlsm"/> falls back on outside the secants; without one it is <see cref="MethodKind.IqnIls"/>.</param>
    public SteppedCoupling(int size, MethodSettings settings, int historyCapacity = 40, ISurrogate? surrogate = null)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(size, 1);
        ArgumentNullException.ThrowIfNull(settings);
        ArgumentOutOfRangeException.ThrowIfNegative(historyCapacity);
        Size = size;
        Settings = settings.Checked();
        this.surrogate = surrogate;
        history = new SecantHistory(size, Math.Max(historyCapacity, settings.HistorySteps));
        previous = new double[size];
    }

    /// <inheritdoc/>
    public int Size { get; }

    /// <summary>The settings in force.</summary>
    public MethodSettings Settings { get; private set; }

    /// <inheritdoc/>
    public UpdateReport? Report { get; private set; }

    /// <summary>Columns available to the next update, under the settings in force and before the filter.</summary>
    public int AvailableColumns => history.Order(Settings.HistorySteps).Length;

    /// <summary>Puts other settings in force; only between steps.</summary>
    /// <exception cref="InvalidOperationException">A step is in hand.</exception>
    public void Change(MethodSettings settings)
    {
        ArgumentNullException.ThrowIfNull(settings);
        RequireBetweenSteps("Settings change");
        Settings = settings.Checked();
    }

    /// <summary>Forgets the columns of all earlier steps; only between steps.</summary>
    public void DropHistory()
    {
        RequireBetweenSteps("The history is dropped");
        history.Clear();
    }

    /// <inheritdoc/>
    public void BeginStep(int step, int attempt = 0)
    {
        ArgumentOutOfRangeException.ThrowIfNegative(step);
        ArgumentOutOfRangeException.ThrowIfNegative(attempt);
        history.Begin(step, attempt);
        Report = null;
        updates = 0;
        aitken = Settings.Relaxation;
        inStep = true;
    }

    /// <inheritdoc/>
    public void Update(ReadOnlySpan<double> residual, ReadOnlySpan<double> output, Span<double> next)
    {
        Check(residual.Length, nameof(residual));
        Check(output.Length, nameof(output));
        Check(next.Length, nameof(next));
        if (!inStep) throw new InvalidOperationException("No step has begun.");
        history.Take(residual, output);
        Report = Settings.Method switch
        {
            MethodKind.Fixed => Relax(Settings.Relaxation, residual, output, next),
            MethodKind.Aitken => Relax(NextAitken(residual), residual, output, next),
            MethodKind.IqnIlsm when surrogate is not null => SurrogateUpdate.Run(history, Settings, surrogate, residual, output, next),
            MethodKind.Mvqn => MultiStepUpdate.Try(history, Settings, residual, output, next) ?? RelaxWithoutColumns(residual, output, next),
            _ => LeastSquaresUpdate.Try(history, Settings, residual, output, next) ?? RelaxWithoutColumns(residual, output, next),
        };
        residual.CopyTo(previous);
        updates++;
    }

    /// <inheritdoc/>
    public void Observe(ReadOnlySpan<double> residual, ReadOnlySpan<double> output)
    {
        Check(residual.Length, nameof(residual));
        Check(output.Length, nameof(output));
        if (!inStep) throw new InvalidOperationException("No step has begun.");
        history.Take(residual, output);
    }

    /// <inheritdoc/>
    public void EndStep(bool lendColumns)
    {
        if (!inStep) throw new InvalidOperationException("No step has begun.");
        history.End(lendColumns);
        inStep = false;
    }

    private double NextAitken(ReadOnlySpan<double> residual)
    {
        if (updates > 0) aitken = AitkenFactor.Next(aitken, previous, residual);
        return aitken;
    }

    private UpdateReport RelaxWithoutColumns(ReadOnlySpan<double> residual, ReadOnlySpan<double> output, Span<double> next) =>
        Relax(Settings.Relaxation, residual, output, next) with { Left = LeastSquaresUpdate.LeftOut(history, Settings) };

    private static UpdateReport Relax(double relaxation, ReadOnlySpan<double> residual, ReadOnlySpan<double> output, Span<double> next)
    {
        for (var i = 0; i < next.Length; i++) next[i] = output[i] - residual[i] + relaxation * residual[i];
        return new UpdateReport { Relaxation = relaxation };
    }

    private void Check(int length, string name)
    {
        if (length != Size) throw new ArgumentException($"{length} entries; the interface vector has {Size}.", name);
    }

    private void RequireBetweenSteps(string what)
    {
        if (inStep) throw new InvalidOperationException($"{what} only between steps.");
    }
}
