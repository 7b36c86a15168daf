namespace LockGate.Loads;

/// <summary>A load on the leaf that does not depend on its motion.</summary>
public interface IGateLoad
{
    /// <summary>Pressure towards the water at a height above the sill, Pa.</summary>
    /// <param name="time">s.</param>
    /// <param name="height">m above the sill.</param>
    double Pressure(double time, double height);
}
