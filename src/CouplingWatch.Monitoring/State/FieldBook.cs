using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.State;

/// <summary>All fields of the run and what they say together: the stacked norm and the need.</summary>
internal sealed class FieldBook
{
    private readonly List<FieldState> fields = [];
    private readonly List<FieldState> unknowns = [];
    private bool declared;

    public IReadOnlyList<FieldState> All => fields;

    /// <summary>The fields that are stacked into the interface vector, in order.</summary>
    public IReadOnlyList<FieldState> Unknowns => unknowns;

    /// <summary>False when a field's norm is not the euclidean one: then the norm is the largest weighted field norm.</summary>
    public bool Euclidean { get; private set; } = true;

    /// <summary>Weighted norm of the stacked residual; NaN or infinite when a field's is.</summary>
    public double Norm { get; private set; } = double.NaN;

    /// <summary>y: the largest need over the fields whose tolerance is declared; null while one of them is unknown.</summary>
    public double? Need { get; private set; }

    /// <summary>The field with the largest need; null while the need is unknown.</summary>
    public FieldState? Governing { get; private set; }

    public bool NotFinite { get; private set; }

    /// <summary>Units differ among the unknown fields and no weights are declared: vectors cannot be stacked fairly.</summary>
    public bool UnitsWithoutWeights { get; private set; }

    public void Declare(IReadOnlyList<FieldDeclaration> declarations)
    {
        declared = true;
        foreach (var declaration in declarations)
        {
            var known = fields.Find(f => f.Name == declaration.Name);
            if (known is null) fields.Add(new FieldState(declaration));
            else known.Declared = declaration;
        }
        Arrange();
    }

    public FieldState? Find(string name) => fields.Find(f => f.Name == name);

    public void BeginStep()
    {
        foreach (var field in fields) field.BeginStep();
        Norm = double.NaN;
        Need = null;
        Governing = null;
        NotFinite = false;
    }

    public void Observe(IterationRecord record)
    {
        if (!declared) DeclareFrom(record.Residuals);
        var squares = 0.0;
        var largest = 0.0;
        NotFinite = false;
        Need = null;
        Governing = null;
        var unknownTolerance = false;
        foreach (var field in fields)
        {
            field.Observe(record);
            if (!field.Sent) continue;
            NotFinite |= !double.IsFinite(field.Residual);
            if (field.Need is not { } need) unknownTolerance = true;
            else if (Governing is null || need > Need)
            {
                Need = need;
                Governing = field;
            }
        }
        if (unknownTolerance)
        {
            Need = null;
            Governing = null;
        }
        foreach (var field in unknowns)
        {
            if (!field.Sent) continue;
            var weighted = Math.Abs(field.Weight * field.Residual);
            squares += weighted * weighted;
            largest = Math.Max(largest, weighted);
        }
        Norm = !Euclidean ? largest : squares is > 1e-300 and < 1e300 || largest == 0 ? Math.Sqrt(squares) : ScaledNorm(largest);
    }

    /// <summary>Weighted norm of the unknown fields of a group; of all of them for null.</summary>
    public double NormOf(string? group)
    {
        if (group is null) return Norm;
        double squares = 0, largest = 0;
        foreach (var field in unknowns)
        {
            if (!field.Sent || field.Declared.Group != group) continue;
            var weighted = Math.Abs(field.Weight * field.Residual);
            squares += weighted * weighted;
            largest = Math.Max(largest, weighted);
        }
        return Euclidean ? Math.Sqrt(squares) : largest;
    }

    public void Accept()
    {
        foreach (var field in fields) field.Accept();
    }

    public void ForgetAttempt()
    {
        foreach (var field in fields) field.ForgetAttempt();
    }

    public void ForgetAccepted()
    {
        foreach (var field in fields) field.ForgetAccepted();
    }

    private double ScaledNorm(double largest)
    {
        if (!double.IsFinite(largest)) return largest;
        var squares = 0.0;
        foreach (var field in unknowns)
        {
            if (!field.Sent) continue;
            var share = field.Weight * field.Residual / largest;
            squares += share * share;
        }
        return largest * Math.Sqrt(squares);
    }

    private void DeclareFrom(NamedValues residuals)
    {
        foreach (var (name, _) in residuals)
            if (Find(name) is null) fields.Add(new FieldState(new FieldDeclaration { Name = name }));
        Arrange();
    }

    private void Arrange()
    {
        unknowns.Clear();
        foreach (var field in fields)
            if (field.Declared.Role == FieldRole.Unknown) unknowns.Add(field);
        if (unknowns.Count == 0) unknowns.AddRange(fields);
        Euclidean = unknowns.TrueForAll(f => f.Declared.Norm == FieldNorm.Euclidean);
        UnitsWithoutWeights = unknowns.Exists(f => f.Declared.Weight is null)
            && unknowns.Exists(f => !string.Equals(f.Declared.Unit, unknowns[0].Declared.Unit, StringComparison.Ordinal));
    }
}
