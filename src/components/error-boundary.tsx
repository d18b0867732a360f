import { Component, type ReactNode } from 'react';

type ErrorBoundaryProps = {
  /** What stands in place of the broken part. */
  fallback: (error: unknown) => ReactNode;
  /** Another value (another page) gives the children a new try. */
  resetKey: string;
  children: ReactNode;
};

type ErrorBoundaryState = { failure: { error: unknown } | null; resetKey: string };

/** Keeps a failure inside its part of the page, so that the rest stays usable. React has this only as a class. */
export class ErrorBoundary extends Component<ErrorBoundaryProps, ErrorBoundaryState> {
  override state: ErrorBoundaryState = { failure: null, resetKey: this.props.resetKey };

  static getDerivedStateFromError(error: unknown): Partial<ErrorBoundaryState> {
    return { failure: { error } };
  }

  static getDerivedStateFromProps(
    props: ErrorBoundaryProps,
    state: ErrorBoundaryState,
  ): Partial<ErrorBoundaryState> | null {
    return props.resetKey === state.resetKey ? null : { failure: null, resetKey: props.resetKey };
  }

  override render(): ReactNode {
    return this.state.failure ? this.props.fallback(this.state.failure.error) : this.props.children;
  }
}
