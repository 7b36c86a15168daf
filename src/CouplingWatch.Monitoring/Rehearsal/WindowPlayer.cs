using CouplingWatch.Coupling;
using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Vectors;

namespace CouplingWatch.Monitoring.Rehearsal;

/// <summary>Plays the window under candidate settings, with the coupling methods themselves on the fitted passes.</summary>
internal sealed class WindowPlayer(RecordedSpace space, IReadOnlyList<(PassModel Own, PassModel Strict)> models, IReadOnlyList<double[]> targets)
{
    private const int MostReused = 12;
    private const double LargestColumn = 60;
    private const double Diverged = 1e8;
    private const int GivesUpAfter = 3;

    public Played Own(ReplaySettings settings, CancellationToken cancel) => Play(settings, own: true, cancel);

    public Played Strict(ReplaySettings settings, CancellationToken cancel) => Play(settings, own: false, cancel);

    private Played Play(ReplaySettings settings, bool own, CancellationToken cancel)
    {
        var coupling = new SteppedCoupling(space.Dimension, settings.Method, Math.Max(1, settings.Method.HistorySteps));
        LendRecorded(coupling, settings.Method.HistorySteps);
        var sum = 0;
        var capped = 0;
        for (var i = 0; i < models.Count; i++)
        {
            cancel.ThrowIfCancellationRequested();
            if (capped >= GivesUpAfter)
            {
                sum += settings.Cap;
                capped++;
                continue;
            }
            var count = PlayStep(coupling, settings, i, own ? models[i].Own : models[i].Strict, out var converged);
            sum += count;
            if (!converged) capped++;
        }
        return new Played(sum / (double)models.Count, capped);
    }

    /// <summary>Columns of the recorded steps before the window, as far as the history reaches and at most twelve steps.</summary>
    private void LendRecorded(SteppedCoupling coupling, int history)
    {
        var from = Math.Max(0, space.WindowFrom - Math.Min(history, MostReused));
        for (var n = from; n < space.WindowFrom; n++)
        {
            var passes = space.Steps[n].Passes;
            coupling.BeginStep(n);
            if (!HasLargeColumn(n))
                foreach (var pass in passes) coupling.Observe(pass.Residual, pass.Output);
            coupling.EndStep(lendColumns: true);
        }
    }

    private bool HasLargeColumn(int n)
    {
        var passes = space.Steps[n].Recorded.Passes;
        var limit = LargestColumn * LongVector.Norm(passes[0].Residual);
        var difference = new double[passes[0].Residual.Length];
        for (var k = 0; k + 1 < passes.Count; k++)
        {
            for (var i = 0; i < difference.Length; i++) difference[i] = passes[k + 1].Residual[i] - passes[k].Residual[i];
            if (!(LongVector.Norm(difference) <= limit)) return true;
        }
        return false;
    }

    private int PlayStep(SteppedCoupling coupling, ReplaySettings settings, int index, PassModel model, out bool converged)
    {
        var step = space.Steps[space.WindowFrom + index];
        var x = (double[])step.StartErrors[settings.Order].Clone();
        var (error, output, next) = (new double[x.Length], new double[x.Length], new double[x.Length]);
        coupling.BeginStep(space.WindowFrom + index);
        for (var k = 0; ; k++)
        {
            for (var i = 0; i < x.Length; i++) error[i] = x[i] - model.FixedPoint[i];
            var residual = model.MinusIdentity.Times(error);
            for (var i = 0; i < x.Length; i++) output[i] = x[i] + residual[i];
            var norm = LongVector.Norm(residual);
            converged = Meets(residual, norm, targets[index]);
            var lost = !(norm <= Diverged * step.OutputNorm);
            if (converged || lost)
            {
                if (!lost) coupling.Observe(residual, output);
                coupling.EndStep(lendColumns: true);
                return converged ? k + 1 : settings.Cap;
            }
            coupling.Update(residual, output, next);
            if (k + 1 >= settings.Cap)
            {
                coupling.EndStep(lendColumns: true);
                return settings.Cap;
            }
            (x, next) = (next, x);
        }
    }

    private bool Meets(double[] residual, double norm, double[] target)
    {
        if (space.FieldGrams is not { } grams) return norm <= target[0];
        for (var f = 0; f < grams.Length; f++)
            if (!(Math.Sqrt(Math.Max(0, LongVector.Dot(residual, grams[f].Times(residual)))) <= target[f])) return false;
        return true;
    }
}

/// <param name="Mean">Iterations a step.</param>
internal readonly record struct Played(double Mean, int CappedSteps);

/// <summary>Candidate settings in the terms of the coupling methods.</summary>
/// <param name="Order">Order of the start extrapolation.</param>
internal readonly record struct ReplaySettings(MethodSettings Method, int Order, int Cap);
