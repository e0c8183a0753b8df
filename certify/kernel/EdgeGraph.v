(** * Graphs whose edges are written out

    The vertices are 0, ..., n - 1. *)

From Coq Require Import Bool List ZArith FMapPositive.
From Certify Require Import Statement Rules.
Import ListNotations.
Open Scope Z_scope.
Open Scope lazy_bool_scope.

(** Edges are looked up by their first vertex. Which edges share a place in the map does
    not matter: both vertices are compared. *)
Definition shelf (u : Z) : positive := Z.to_pos (u + 1).

Definition shelve (edges : list (Z * Z)) : PositiveMap.t (list (Z * Z)) :=
  fold_right
    (fun e m =>
       let i := shelf (fst e) in
       match PositiveMap.find i m with
       | Some l => PositiveMap.add i (e :: l) m
       | None => PositiveMap.add i [e] m
       end)
    (PositiveMap.empty _) edges.

Fixpoint listed (u v : Z) (edges : list (Z * Z)) : bool :=
  match edges with
  | [] => false
  | e :: l => ((u =? fst e) &&& (v =? snd e)) ||| listed u v l
  end.

Definition shelved (m : PositiveMap.t (list (Z * Z))) (u v : Z) : bool :=
  match PositiveMap.find (shelf u) m with
  | Some l => listed u v l
  | None => false
  end.

(** [joins edges u v]: (u, v) or (v, u) is in the list ([joins_spec]). *)
Definition joins (edges : list (Z * Z)) : Z -> Z -> bool :=
  let m := shelve edges in fun u v => shelved m u v ||| shelved m v u.

Definition edge_graph (n : Z) (edges : list (Z * Z)) : query Z :=
  {| vertices := range 0 (n - 1);
     adjacent := joins edges;
     ends := []; required := []; forbidden := [] |}.

(** The same graph, with demands. *)
Definition demand (Q : query Z) (ends : list Z) (required forbidden : list (Z * Z)) : query Z :=
  {| vertices := vertices Q;
     adjacent := adjacent Q;
     ends := ends; required := required; forbidden := forbidden |}.

(** ** What [joins] means *)

Lemma listed_spec : forall u v l, listed u v l = true <-> In (u, v) l.
Proof.
  intros u v l. induction l as [|[x y] l IH]; simpl; [intuition discriminate|].
  rewrite <- andb_lazy_alt, <- orb_lazy_alt, orb_true_iff, andb_true_iff, !Z.eqb_eq, IH.
  intuition congruence.
Qed.

Lemma shelved_spec : forall edges u v, shelved (shelve edges) u v = true <-> In (u, v) edges.
Proof.
  intros edges u v. unfold shelved. induction edges as [|[x y] edges IH]; simpl.
  - rewrite PositiveMap.gempty. intuition discriminate.
  - rewrite <- IH. clear IH.
    destruct (Pos.eq_dec (shelf u) (shelf x)) as [Heq|Hother].
    + rewrite Heq. destruct (PositiveMap.find (shelf x) (shelve edges)) as [l|];
        rewrite PositiveMap.gss, !listed_spec; simpl; intuition (congruence || discriminate).
    + assert (u <> x) by congruence.
      destruct (PositiveMap.find (shelf x) (shelve edges)) as [l|];
        rewrite PositiveMap.gso by assumption; intuition congruence.
Qed.

Lemma joins_spec : forall edges u v,
  joins edges u v = true <-> In (u, v) edges \/ In (v, u) edges.
Proof.
  intros edges u v. unfold joins.
  now rewrite <- orb_lazy_alt, orb_true_iff, !shelved_spec.
Qed.
